import { ERRORS, type Lock, type Locker } from '@tus/server'

const patienceMs = 30_000

/**
 * One request at a time may write to an upload. Who comes later asks the holder to let go: after a cut that only the
 * sender has noticed, the old request still waits for bytes while the new one is there to go on.
 * (The library's own lock asks in a tight loop, which keeps a core busy.)
 */
export function openUploadLocks(): Locker {
  const held = new Map<string, { askBack: () => void, freed: Promise<void>, free: () => void }>()
  return {
    newLock: (id): Lock => ({
      async lock(signal, askBack) {
        const patience = AbortSignal.any([signal, AbortSignal.timeout(patienceMs)])
        const givenUp = new Promise<void>(resolve => patience.addEventListener('abort', () => resolve(), { once: true }))
        for (let holder = held.get(id); holder; holder = held.get(id)) {
          holder.askBack()
          await Promise.race([holder.freed, givenUp])
          if (patience.aborted) throw ERRORS.ERR_LOCK_TIMEOUT
        }
        let free = () => {}
        const freed = new Promise<void>(resolve => free = resolve)
        held.set(id, { askBack: () => void askBack(), freed, free })
      },
      async unlock() {
        held.get(id)?.free()
        held.delete(id)
      },
    }),
  }
}
