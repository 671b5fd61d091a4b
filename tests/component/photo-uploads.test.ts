import { describe, expect, it, vi } from 'vitest'
import type { Photo } from '../../shared/schemas/photos'
import type { Upload as StoredUpload } from '../../shared/schemas/uploads'
import type { SendingHooks } from '../../utils/send-resumably'
import { ApiError } from '../../utils/api-error'
import { usePhotoUploads } from '../../composables/usePhotoUploads'

const photo = (name: string) => ({ id: name, name }) as Photo
const file = (name: string, text = 'picture') => new File([text], name)
const refusal = (message: string, status: number) => new ApiError(status, 'internal', message)

interface HeldRequest { name: string, uploadId: string | null, hooks: SendingHooks, signal: AbortSignal, arrive: (photo: Photo) => void, fail: (error: Error) => void }

/** Requests that answer only when the test says so. A file's fingerprint is its text. */
function start({ here = [] as string[] } = {}) {
  const held: HeldRequest[] = []
  const send = (sent: File | null, uploadId: string | null, hooks: SendingHooks) => new Promise<Photo>((arrive, fail) => {
    held.push({ name: sent?.name ?? '', uploadId, hooks, signal: hooks.signal, arrive, fail })
    hooks.signal.addEventListener('abort', () => fail(hooks.signal.reason as Error))
  })
  const [kept, givenUp]: [string[], string[]] = [[], []]
  const onKept = (arrived: Photo) => {
    kept.push(arrived.name)
    return here.includes(arrived.name)
  }
  return { held, kept, givenUp, ...usePhotoUploads({ send, onKept, giveUp: id => void givenUp.push(id), fingerprintOf: file => file.text() }) }
}
const stored = (id: string, text: string, receivedBytes: number): StoredUpload => ({
  id, fileName: `${id}.jpg`, bytes: text.length, receivedBytes, fingerprint: text, lastModifiedMs: 0, origin: 'screen', state: 'unfinished', photoId: null, refusal: null, createdAt: '', expiresAt: '',
})
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
    u.held[1]!.hooks.onShare(0.5)
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
    u.goOn(u.uploads.value[0]!.key)
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

  it('says while the connection is cut, and that it goes on', () => {
    const u = start()
    u.add([file('a.jpg')])
    u.held[0]!.hooks.onShare(0.4)
    u.held[0]!.hooks.onCut()
    expect(u.uploads.value[0]).toMatchObject({ state: 'cut', share: 0.4 })
    u.held[0]!.hooks.onShare(0.5)
    expect(u.uploads.value[0]).toMatchObject({ state: 'sending', share: 0.5 })
  })

  it('pauses one, lets the next have its place, and goes on where it was', async () => {
    const u = start()
    u.add([file('a.jpg'), file('b.jpg'), file('c.jpg')])
    const { key } = u.uploads.value[0]!
    u.held[0]!.hooks.onBegun('upload-a')
    u.held[0]!.hooks.onShare(0.4)
    u.pause(key)
    await settle()
    expect(u.uploads.value.map(x => x.state)).toEqual(['paused', 'sending', 'sending'])
    u.held[0]!.hooks.onShare(0.9)
    expect(u.uploads.value[0]!.share, 'a late word of what is paused').toBe(0.4)
    u.goOn(key)
    expect(u.uploads.value[0]!.state).toBe('waiting')
    u.held[1]!.arrive(photo('b'))
    await settle()
    expect(u.held.at(-1)).toMatchObject({ name: 'a.jpg', uploadId: 'upload-a' })
    expect(u.givenUp).toEqual([])
  })

  it('has the server forget what is stopped', async () => {
    const u = start()
    u.add([file('a.jpg')])
    u.held[0]!.hooks.onBegun('upload-a')
    u.remove(u.uploads.value[0]!.key)
    await settle()
    expect([u.givenUp, u.uploads.value]).toEqual([['upload-a'], []])
  })

  it('asks for the file of what was broken off, takes no other, and goes on with the right one', async () => {
    const u = start()
    u.refreshStored([stored('weir', 'the weir at noon', 8)])
    const { key } = u.uploads.value[0]!
    expect(u.uploads.value[0]).toMatchObject({ name: 'weir.jpg', state: 'stored', share: 0.5 })
    await u.chooseAgain(key, file('weir.jpg', 'the mill at noon'))
    expect(u.uploads.value[0]).toMatchObject({ state: 'stored', message: expect.stringContaining('another file') })
    await u.chooseAgain(key, file('renamed by the phone.jpg', 'the weir at noon'))
    expect(u.held[0]).toMatchObject({ uploadId: 'weir', name: 'renamed by the phone.jpg' })
    expect(u.uploads.value[0]).toMatchObject({ state: 'sending', message: '' })
  })

  it('knows a file that was broken off when it is dropped among others', async () => {
    const u = start()
    u.refreshStored([stored('weir', 'the weir at noon', 8), stored('mill', 'the mill at dusk', 3)])
    u.add([file('a.jpg', 'quite another picture'), file('weir.jpg', 'the weir at noon'), file('x.jpg', 'sixteen letters.')])
    await vi.waitFor(() => expect(u.held.map(h => [h.name, h.uploadId])).toEqual([['a.jpg', null], ['weir.jpg', 'weir']]))
    await vi.waitFor(() => expect(u.uploads.value.map(x => [x.name, x.state])).toEqual([['weir.jpg', 'sending'], ['mill.jpg', 'stored'], ['a.jpg', 'sending'], ['x.jpg', 'waiting']]))
  })

  it('finishes what has arrived whole without its file, and drops what the server no longer holds', async () => {
    const u = start()
    u.refreshStored([stored('whole', 'picture', 7), stored('half', 'picture', 3)])
    expect(u.held.map(h => [h.name, h.uploadId])).toEqual([['', 'whole']])
    u.refreshStored([stored('whole', 'picture', 7)])
    expect(u.uploads.value.map(x => x.name)).toEqual(['whole.jpg'])
    u.held[0]!.arrive(photo('whole'))
    await settle()
    expect(u.kept).toEqual(['whole'])
  })
})
