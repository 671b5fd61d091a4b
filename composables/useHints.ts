import { contract } from '#build/client-contract'

export interface Hint { topic: string, id: string, revision: number }
type Listener = (hint: Hint | 'resync') => void

const listeners = new Set<Listener>()
let openFor: string | undefined
let close: (() => void) | undefined

/**
 * Calls `listener` for hints of these topics, and for `resync` after every (re)connect, while the component lives.
 * All tabs of a studio share one stream: the tab that holds the lock reads it and passes hints on.
 */
export function useHints(topics: string[], listener: (hint: Hint | 'resync') => void) {
  const studio = useStudioStore()
  const listen: Listener = hint => (hint === 'resync' || topics.includes(hint.topic)) && listener(hint)
  onMounted(() => {
    listeners.add(listen)
    if (openFor !== studio.slug) openStream(studio.slug)
  })
  onUnmounted(() => {
    listeners.delete(listen)
    if (listeners.size === 0) closeStream()
  })
}

function openStream(studio: string) {
  closeStream()
  openFor = studio
  const channel = new BroadcastChannel(`emulside-hints-${studio}`)
  const ended = new AbortController()
  channel.onmessage = event => tell(event.data as Hint | 'resync')
  const read = () => readStream(studio, ended.signal, (hint) => {
    tell(hint)
    channel.postMessage(hint)
  })
  // Locks need a secure context; without them each tab reads a stream of its own.
  if (navigator.locks) navigator.locks.request(`emulside-hints-${studio}`, { signal: ended.signal }, read).catch(() => {})
  else void read()
  close = () => {
    ended.abort()
    channel.close()
  }
}

function closeStream() {
  close?.()
  close = openFor = undefined
}

const tell = (hint: Hint | 'resync') => listeners.forEach(listener => listener(hint))

/** Reads until the signal ends it; the browser reconnects by itself. */
function readStream(studio: string, signal: AbortSignal, onHint: (hint: Hint | 'resync') => void): Promise<void> {
  return new Promise((resolve) => {
    const source = new EventSource(addressOf(contract.events, { studio }))
    source.onmessage = (event) => {
      const hint = JSON.parse(event.data as string) as Hint
      onHint(hint.topic === 'resync' ? 'resync' : hint)
    }
    source.addEventListener('resync', () => onHint('resync'))
    signal.addEventListener('abort', () => {
      source.close()
      resolve()
    })
  })
}
