import { computed, ref } from 'vue'
import { limits } from '#shared/schemas/limits'
import type { Photo } from '#shared/schemas/photos'
import type { Upload as StoredUpload } from '#shared/schemas/uploads'
import { ApiError, sentenceOf } from '~/utils/api-error'
import type { SendingHooks } from '~/utils/send-resumably'

/** `cut`: waits for the connection; `paused`: by its sender; `stored`: begun before, its file has to be chosen again. */
export type UploadState = 'waiting' | 'sending' | 'cut' | 'paused' | 'stored' | 'kept' | 'refused'
export interface Upload {
  key: number
  name: string
  bytes: number
  state: UploadState
  /** of the bytes that have left, 0 to 1 */
  share: number
  /** the same bytes were in the studio before */
  alreadyHere: boolean
  message: string
  retryable: boolean
}

interface UploadSettings {
  /** sends the rest of a file, or only asks for the photo where all of it is there; `uploadId` is null for one that has not begun */
  send: (file: File | null, uploadId: string | null, hooks: SendingHooks) => Promise<Photo>
  /** tells the server to forget what has arrived */
  giveUp: (uploadId: string) => void
  fingerprintOf: (file: File) => Promise<string>
  /** told of each photo that arrived; answers whether it was here before */
  onKept: (photo: Photo) => boolean
}

/** Two at a time: one fills the line while the other is being read at the far end. */
const atOnce = 2
const onTheWay: readonly UploadState[] = ['sending', 'cut']

interface Source { file?: File, uploadId: string | null, fingerprint?: string | null, stop?: AbortController }

/** Files on their way to the studio: each with its own progress, pause, refusal and second try; what broke off goes on where it was. */
export function usePhotoUploads({ send, giveUp, fingerprintOf, onKept }: UploadSettings) {
  const uploads = ref<Upload[]>([])
  const sources = new Map<number, Source>()
  let lastKey = 0

  const among = (...states: UploadState[]) => uploads.value.filter(upload => states.includes(upload.state))
  const counts = computed(() => ({ all: uploads.value.length, kept: among('kept').length, refused: among('refused').length, open: among('waiting', ...onTheWay).length }))
  const share = computed(() => {
    const counted = uploads.value.filter(upload => upload.state !== 'stored')
    const bytes = counted.reduce((sum, u) => sum + u.bytes, 0)
    const gone = counted.reduce((sum, u) => sum + u.bytes * (u.state === 'kept' || u.state === 'refused' ? 1 : u.share), 0)
    return bytes === 0 ? 0 : gone / bytes
  })

  function enter(name: string, bytes: number, state: UploadState, source: Source): number {
    const key = ++lastKey
    sources.set(key, source)
    uploads.value.push({ key, name, bytes, state, share: 0, alreadyHere: false, message: '', retryable: false })
    return key
  }

  function change(key: number, fields: Partial<Upload>) {
    const upload = uploads.value.find(u => u.key === key)
    if (upload) Object.assign(upload, fields)
  }

  function add(chosen: Iterable<File>) {
    if (counts.value.open === 0) uploads.value = among('refused', 'paused', 'stored')
    for (const file of chosen) {
      if (among('stored').some(upload => upload.bytes === file.size)) void goOnOrBegin(file)
      else begin(file)
    }
    fillLine()
  }

  function begin(file: File) {
    const key = enter(file.name, file.size, 'waiting', { file, uploadId: null })
    refuseAtDoor(key, file)
  }

  /** A file that was begun before goes on from there, without being asked for by its name. */
  async function goOnOrBegin(file: File) {
    const fingerprint = await fingerprintOf(file)
    const known = among('stored').find(({ key, bytes }) => bytes === file.size && sources.get(key)!.fingerprint === fingerprint)
    if (known) goOnWith(known.key, file)
    else begin(file)
    fillLine()
  }

  /** What no server needs to see: it would only travel to be refused. */
  function refuseAtDoor(key: number, file: File) {
    if (file.size > limits.fileMaxBytes) change(key, { state: 'refused', message: 'This file is larger than 1 GB. Save it as a JPEG or as a smaller picture.' })
    else if (file.size === 0) change(key, { state: 'refused', message: 'This file is empty. Copy it from the camera again.' })
  }

  /** All that the server holds of one’s own; what it no longer holds goes off the list. */
  function refreshStored(stored: StoredUpload[]) {
    const there = new Set(stored.map(({ id }) => id))
    for (const { key } of among('stored').filter(({ key }) => !there.has(sources.get(key)!.uploadId!))) {
      sources.delete(key)
      uploads.value = uploads.value.filter(upload => upload.key !== key)
    }
    takeUp(stored)
  }

  /** Of what has arrived in part the rest is asked for; what is there whole is only finished. */
  function takeUp(stored: StoredUpload[]) {
    const known = new Set([...sources.values()].map(source => source.uploadId))
    for (const { id, fileName, bytes, receivedBytes, fingerprint } of stored.filter(({ id }) => !known.has(id))) {
      const key = enter(fileName, bytes, receivedBytes === bytes ? 'waiting' : 'stored', { uploadId: id, fingerprint })
      change(key, { share: receivedBytes / bytes })
    }
    fillLine()
  }

  /** Goes on with a stored upload by its file, chosen again; another file is told apart. */
  async function chooseAgain(key: number, file: File) {
    const { bytes, name } = uploads.value.find(u => u.key === key)!
    const { fingerprint } = sources.get(key)!
    const isSame = file.size === bytes && (fingerprint ? await fingerprintOf(file) === fingerprint : file.name === name)
    if (!isSame) return change(key, { message: `This is another file, or ${name} has been changed since. Choose ${name} as it was, or remove this one and send it anew.` })
    goOnWith(key, file)
    fillLine()
  }

  function goOnWith(key: number, file: File) {
    sources.get(key)!.file = file
    change(key, { state: 'waiting', message: '' })
  }

  function fillLine() {
    const free = atOnce - among(...onTheWay).length
    for (const upload of among('waiting').slice(0, Math.max(0, free))) void run(upload.key)
  }

  async function run(key: number) {
    const source = sources.get(key)!
    const stop = source.stop = new AbortController()
    const stillOn = (fields: Partial<Upload>) => !stop.signal.aborted && change(key, fields)
    change(key, { state: 'sending' })
    try {
      const photo = await send(source.file ?? null, source.uploadId, {
        onBegun: id => source.uploadId = id,
        onShare: share => stillOn({ state: 'sending', share }),
        onCut: () => stillOn({ state: 'cut' }),
        signal: stop.signal,
      })
      sources.delete(key)
      change(key, { state: 'kept', share: 1, alreadyHere: onKept(photo) })
    }
    catch (error) {
      stillOn({ state: 'refused', ...refusalOf(error) })
    }
    fillLine()
  }

  function pause(key: number) {
    change(key, { state: 'paused' })
    sources.get(key)?.stop?.abort(new DOMException('Paused.', 'AbortError'))
    fillLine()
  }

  /** Also the second try of what was refused. */
  function goOn(key: number) {
    change(key, { state: 'waiting', message: '', retryable: false })
    fillLine()
  }

  /** Stops what is on its way, takes it off the list and has the server forget what has arrived. */
  function remove(key: number) {
    const source = sources.get(key)
    source?.stop?.abort(new DOMException('Stopped.', 'AbortError'))
    if (source?.uploadId) giveUp(source.uploadId)
    sources.delete(key)
    uploads.value = uploads.value.filter(upload => upload.key !== key)
    fillLine()
  }

  const stopAll = () => among('waiting', ...onTheWay).forEach(u => remove(u.key))

  return { uploads, counts, share, add, takeUp, refreshStored, chooseAgain, pause, goOn, remove, stopAll }
}

/** The service's own sentence. A second try is offered where it can help: not for a file that is no picture. */
function refusalOf(error: unknown): Pick<Upload, 'message' | 'retryable'> {
  const { status, code } = error instanceof ApiError ? error : { status: 0, code: undefined }
  return { message: sentenceOf(error), retryable: [0, 401, 408, 409, 429].includes(status) || status >= 500 || code === 'studio_full' }
}
