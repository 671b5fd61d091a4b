import { computed, ref } from 'vue'
import { limits } from '#shared/schemas/limits'
import type { Photo } from '#shared/schemas/photos'
import { ApiError, sentenceOf } from '~/utils/api-error'

export type UploadState = 'waiting' | 'sending' | 'kept' | 'refused'
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
  send: (file: File, onShare: (share: number) => void, signal: AbortSignal) => Promise<Photo>
  /** told of each photo that arrived; answers whether it was here before */
  onKept: (photo: Photo) => boolean
}

/** Two at a time: one fills the line while the other is being read at the far end. */
const atOnce = 2

/** Files on their way to the studio: each with its own progress, its own refusal, a second try and a way to stop. */
export function usePhotoUploads({ send, onKept }: UploadSettings) {
  const uploads = ref<Upload[]>([])
  const files = new Map<number, File>()
  const stops = new Map<number, AbortController>()
  let lastKey = 0

  const counts = computed(() => {
    const of = (state: UploadState) => uploads.value.filter(upload => upload.state === state).length
    return { all: uploads.value.length, kept: of('kept'), refused: of('refused'), open: of('waiting') + of('sending') }
  })
  const share = computed(() => {
    const bytes = uploads.value.reduce((sum, u) => sum + u.bytes, 0)
    const gone = uploads.value.reduce((sum, u) => sum + u.bytes * (u.state === 'kept' || u.state === 'refused' ? 1 : u.share), 0)
    return bytes === 0 ? 0 : gone / bytes
  })

  function add(chosen: Iterable<File>) {
    if (counts.value.open === 0) uploads.value = uploads.value.filter(upload => upload.state === 'refused')
    for (const file of chosen) {
      const key = ++lastKey
      files.set(key, file)
      uploads.value.push({ key, name: file.name, bytes: file.size, state: 'waiting', share: 0, alreadyHere: false, message: '', retryable: false })
      refuseAtDoor(key, file)
    }
    fillLine()
  }

  /** What no server needs to see: it would only travel to be refused. */
  function refuseAtDoor(key: number, file: File) {
    if (file.size > limits.fileMaxBytes) change(key, { state: 'refused', message: 'This file is larger than 1 GB. Save it as a JPEG or as a smaller picture.' })
    else if (file.size === 0) change(key, { state: 'refused', message: 'This file is empty. Copy it from the camera again.' })
  }

  function change(key: number, fields: Partial<Upload>) {
    const upload = uploads.value.find(u => u.key === key)
    if (upload) Object.assign(upload, fields)
  }

  function fillLine() {
    const free = atOnce - uploads.value.filter(upload => upload.state === 'sending').length
    for (const upload of uploads.value.filter(u => u.state === 'waiting').slice(0, free)) void run(upload.key)
  }

  async function run(key: number) {
    const stop = new AbortController()
    stops.set(key, stop)
    change(key, { state: 'sending', share: 0 })
    try {
      const photo = await send(files.get(key)!, share => change(key, { share }), stop.signal)
      files.delete(key)
      change(key, { state: 'kept', share: 1, alreadyHere: onKept(photo) })
    }
    catch (error) {
      change(key, { state: 'refused', ...refusalOf(error) })
    }
    stops.delete(key)
    fillLine()
  }

  function retry(key: number) {
    change(key, { state: 'waiting', message: '', retryable: false })
    fillLine()
  }

  /** Stops what is on its way and takes it off the list. */
  function remove(key: number) {
    stops.get(key)?.abort()
    files.delete(key)
    uploads.value = uploads.value.filter(upload => upload.key !== key)
  }

  const stopAll = () => uploads.value.filter(u => u.state === 'waiting' || u.state === 'sending').forEach(u => remove(u.key))

  return { uploads, counts, share, add, retry, remove, stopAll }
}

/** The service's own sentence. A second try is offered where it can help: not for a file that is no picture. */
function refusalOf(error: unknown): Pick<Upload, 'message' | 'retryable'> {
  const status = error instanceof ApiError ? error.status : 0
  return { message: sentenceOf(error), retryable: [0, 401, 408, 429].includes(status) || status >= 500 }
}
