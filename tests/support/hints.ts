import type { Agent } from './studio'

interface Said { event: string, data: { topic?: string, id?: string, revision?: number }, at: number }

/** Listens to a studio's stream; `until` waits for something to have been said. */
export async function listen(agent: Agent, root: string) {
  const response = await agent.fetch('GET', `${root}/events`, { headers: { accept: 'text/event-stream' } })
  if (!response.headers.get('content-type')?.includes('text/event-stream')) throw new Error(`The stream of hints answered ${response.status}.`)
  const reader = response.body!.getReader()
  const said: Said[] = []
  let ended = false
  const waiting = new Set<() => void>()
  void (async () => {
    const decoder = new TextDecoder()
    let rest = ''
    for (let chunk = await reader.read(); !chunk.done; chunk = await reader.read()) {
      const parts = (rest + decoder.decode(chunk.value, { stream: true })).split('\n\n')
      rest = parts.pop()!
      for (const part of parts) {
        const field = (name: string) => new RegExp(`^${name}: ?(.*)$`, 'm').exec(part)?.[1]
        said.push({ event: field('event') ?? 'message', data: JSON.parse(field('data')!), at: performance.now() })
      }
      for (const wake of waiting) wake()
    }
    ended = true
    for (const wake of waiting) wake()
  })().catch(() => { ended = true })
  const until = (is: () => boolean) => new Promise<void>((resolve, reject) => {
    const late = setTimeout(() => reject(new Error(`Not said within 10 s; said: ${JSON.stringify(said)}`)), 10_000)
    const look = () => {
      if (!is()) return
      clearTimeout(late)
      waiting.delete(look)
      resolve()
    }
    waiting.add(look)
    look()
  })
  await until(() => said.length > 0)
  return { said, until, hints: () => said.filter(s => s.event === 'message').map(s => s.data), isEnded: () => ended, leave: () => reader.cancel() }
}
