import { setTimeout as sleep } from 'node:timers/promises'
import { newPicture, uploadForm } from './pictures'
import type { Agent } from './studio'

export interface InStudio { agent: Agent, root: string }

/** An uploaded picture's record. */
export async function newPhoto({ agent, root }: InStudio, picture?: Parameters<typeof newPicture>[0]) {
  const answer = await agent.call('POST', `${root}/photos`, { body: uploadForm([['weir.jpg', await newPicture(picture)]]) })
  if (answer.status !== 201) throw new Error(`Uploading answered ${answer.status}: ${answer.text}`)
  return answer.body.items[0]
}

/** A negative on the starter bench for cyanotype, small unless asked otherwise. */
export async function newNegative(studio: InStudio, changes: Record<string, unknown> = {}) {
  const photoId = changes.photoId ?? (await newPhoto(studio)).id
  const answer = await studio.agent.post(`${studio.root}/negatives`, { photoId, process: 'cyanotype', size: { widthMm: 60, heightMm: 40 }, ...changes })
  if (answer.status !== 201) throw new Error(`Making a negative answered ${answer.status}: ${answer.text}`)
  return answer.body
}

/** Asks for a negative's film until it is there; `states` are the states seen on the way. */
export const filmOf = ({ agent, root }: InStudio, negativeId: string, format: 'tiff' | 'png' | 'pdf' = 'tiff', seconds = 60) =>
  filmAt(agent, `${root}/negatives/${negativeId}/file?format=${format}`, seconds)

/** The same for any film file's address. */
export async function filmAt(agent: Agent, path: string, seconds = 60) {
  const states: string[] = []
  for (const deadline = Date.now() + 1000 * seconds; Date.now() < deadline; await sleep(100)) {
    const response = await agent.fetch('GET', path)
    if (response.status !== 202) return { status: response.status, headers: response.headers, bytes: Buffer.from(await response.arrayBuffer()), states }
    const { state } = await response.json() as { state: string }
    if (states.at(-1) !== state) states.push(state)
  }
  throw new Error(`The film did not get ready within ${seconds} s; it was ${states.join(', ')}.`)
}
