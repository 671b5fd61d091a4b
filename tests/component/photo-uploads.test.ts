import { describe, expect, it, vi } from 'vitest'
import type { Photo } from '../../shared/schemas/photos'
import { ApiError } from '../../utils/api-error'
import { usePhotoUploads } from '../../composables/usePhotoUploads'

const photo = (name: string) => ({ id: name, name }) as Photo
const file = (name: string, text = 'picture') => new File([text], name)
const refusal = (message: string, status: number) => new ApiError(status, 'internal', message)

interface HeldRequest { name: string, onShare: (share: number) => void, signal: AbortSignal, arrive: (photo: Photo) => void, fail: (error: Error) => void }

/** Requests that answer only when the test says so. */
function start({ here = [] as string[] } = {}) {
  const held: HeldRequest[] = []
  const send = (sent: File, onShare: (share: number) => void, signal: AbortSignal) => new Promise<Photo>((arrive, fail) => {
    held.push({ name: sent.name, onShare, signal, arrive, fail })
    signal.addEventListener('abort', () => fail(new DOMException('stopped', 'AbortError')))
  })
  const kept: string[] = []
  const onKept = (arrived: Photo) => {
    kept.push(arrived.name)
    return here.includes(arrived.name)
  }
  return { held, kept, ...usePhotoUploads({ send, onKept }) }
}
const settle = () => new Promise(resolve => setTimeout(resolve))

describe('usePhotoUploads', () => {
  it('sends two at a time and goes on as each is answered', async () => {
    const u = start()
    u.add([file('a.jpg'), file('b.jpg'), file('c.jpg')])
    expect(u.held.map(h => h.name)).toEqual(['a.jpg', 'b.jpg'])
    expect(u.uploads.value.map(x => x.state)).toEqual(['sending', 'sending', 'waiting'])
    u.held[0]!.arrive(photo('a'))
    await settle()
    expect(u.held.map(h => h.name)).toEqual(['a.jpg', 'b.jpg', 'c.jpg'])
    expect(u.kept).toEqual(['a'])
    expect(u.counts.value).toEqual({ all: 3, kept: 1, refused: 0, open: 2 })
  })

  it('keeps one file’s refusal apart from the others, in the service’s own words', async () => {
    const u = start({ here: ['a'] })
    u.add([file('a.jpg'), file('notes.jpg')])
    u.held[1]!.fail(refusal('This is not a picture.', 415))
    u.held[0]!.arrive(photo('a'))
    await settle()
    expect(u.uploads.value.map(({ name, state, message, alreadyHere, retryable }) => ({ name, state, message, alreadyHere, retryable }))).toEqual([
      { name: 'a.jpg', state: 'kept', message: '', alreadyHere: true, retryable: false },
      { name: 'notes.jpg', state: 'refused', message: 'This is not a picture.', alreadyHere: false, retryable: false },
    ])
  })

  it('counts progress by bytes over all files', () => {
    const u = start()
    u.add([file('small', 'x'.repeat(100)), file('large', 'x'.repeat(300))])
    u.held[1]!.onShare(0.5)
    expect(u.share.value).toBeCloseTo(150 / 400)
  })

  it('refuses an empty file without sending it', () => {
    const u = start()
    u.add([file('empty.jpg', '')])
    expect(u.held).toEqual([])
    expect(u.uploads.value[0]).toMatchObject({ state: 'refused', message: 'This file is empty. Copy it from the camera again.' })
  })

  it('tries again on request', async () => {
    const u = start()
    u.add([file('a.jpg')])
    u.held[0]!.fail(refusal('broken off', 503))
    await settle()
    expect(u.uploads.value[0]).toMatchObject({ state: 'refused', retryable: true })
    u.retry(u.uploads.value[0]!.key)
    expect(u.uploads.value[0]).toMatchObject({ state: 'sending', message: '' })
    expect(u.held).toHaveLength(2)
  })

  it('stops a request that is taken off the list and fills its place', async () => {
    const u = start()
    u.add([file('a.jpg'), file('b.jpg'), file('c.jpg')])
    const aborted = vi.fn()
    u.held[0]!.signal.addEventListener('abort', aborted)
    u.remove(u.uploads.value[0]!.key)
    await settle()
    expect(aborted).toHaveBeenCalledOnce()
    expect(u.uploads.value.map(x => x.name)).toEqual(['b.jpg', 'c.jpg'])
    expect(u.held.map(h => h.name)).toEqual(['a.jpg', 'b.jpg', 'c.jpg'])
  })
})
