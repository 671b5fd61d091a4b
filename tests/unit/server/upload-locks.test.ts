import { describe, expect, it } from 'vitest'
import { openUploadLocks } from '../../../server/utils/upload-locks'

const never = new AbortController().signal

describe('an upload’s lock', () => {
  it('is asked back by who comes later, and passes on when it is let go', async () => {
    const locks = openUploadLocks()
    const first = locks.newLock('a'), second = locks.newLock('a')
    const asked: string[] = []
    await first.lock(never, () => void asked.push('first'))
    const waiting = second.lock(never, () => void asked.push('second')).then(() => asked.push('second has it'))
    await Promise.resolve()
    expect(asked).toEqual(['first'])
    await first.unlock()
    await waiting
    expect(asked).toEqual(['first', 'second has it'])
    await second.unlock()
  })

  it('holds one at a time, however many wait', async () => {
    const locks = openUploadLocks()
    let [holders, most] = [0, 0]
    await Promise.all(Array.from({ length: 20 }, async () => {
      const lock = locks.newLock('a')
      await lock.lock(never, () => {})
      most = Math.max(most, ++holders)
      await new Promise(resolve => setTimeout(resolve))
      holders--
      await lock.unlock()
    }))
    expect(most).toBe(1)
  })

  it('is of one upload only, and is not waited for by a request that has ended', async () => {
    const locks = openUploadLocks()
    await locks.newLock('a').lock(never, () => {})
    await locks.newLock('b').lock(never, () => {})
    const ended = new AbortController()
    const waiting = locks.newLock('a').lock(ended.signal, () => {})
    ended.abort()
    await expect(waiting).rejects.toMatchObject({ status_code: 500 })
  })
})
