import type { DetailedError, Upload } from 'tus-js-client'
import { limits } from '#shared/schemas/limits'
import { fingerprintOf, fingerprintSlices } from '#shared/uploads/fingerprint'
import { ApiError, unreachable } from './api-error'

export interface SendingHooks {
  /** the server has given it a name: from here on it can be gone on with */
  onBegun: (uploadId: string) => void
  /** of the bytes that have left, 0 to 1 */
  onShare: (share: number) => void
  /** the connection is cut; it goes on by itself */
  onCut: () => void
  signal: AbortSignal
}

/** Soon at first, then every fifteen seconds for about an hour; each byte that gets through starts the count again. */
const retryDelaysMs = [500, 1000, 2000, 4000, 8000, ...Array<number>(240).fill(15_000)]

/** What mends itself while one waits: no answer at all, a server that restarts, another request that still holds the upload. */
export const mendsItself = ({ status, code }: ApiError): boolean =>
  [0, 502, 504].includes(status) || (status === 503 && code !== 'image_child_failed') || code === 'wrong_offset'

/** What a file is known again by: see shared/uploads. */
export async function fingerprintOfFile(file: Blob): Promise<string> {
  const slices: Uint8Array[] = []
  for (const { start, end } of fingerprintSlices(file.size)) slices.push(new Uint8Array(await file.slice(start, end).arrayBuffer()))
  return fingerprintOf(slices)
}

/** Sends a file by the resumable protocol, from where an earlier try has ended; answers the upload's id when every byte is there. */
export async function sendResumably(file: File, endpoint: string, uploadId: string | null, { onBegun, onShare, onCut, signal }: SendingHooks): Promise<string> {
  const [{ Upload }, fingerprint] = await Promise.all([import('tus-js-client'), fingerprintOfFile(file)])
  signal.throwIfAborted()
  return new Promise((resolve, reject) => {
    const upload = new Upload(file, {
      endpoint, uploadUrl: uploadId && `${endpoint}/${uploadId}`, retryDelays: retryDelaysMs, storeFingerprintForResuming: false,
      metadata: { filename: file.name.slice(0, limits.fileNameLength), lastModified: String(file.lastModified), fingerprint },
      onUploadUrlAvailable: () => onBegun(idOf(upload)),
      onProgress: (sent, all) => onShare(sent / all),
      onShouldRetry: error => mendsItself(apiErrorOf(error)) && (onCut(), true),
      onSuccess: () => end(() => resolve(idOf(upload))),
      onError: error => end(() => reject(apiErrorOf(error))),
    })
    const again = () => void upload.abort().then(() => upload.start()) // no need to wait for the next try
    const stop = () => void upload.abort().then(() => end(() => reject(signal.reason)))
    const end = (settle: () => void) => {
      removeEventListener('online', again)
      signal.removeEventListener('abort', stop)
      settle()
    }
    addEventListener('online', again)
    signal.addEventListener('abort', stop)
    upload.start()
  })
}

const idOf = (upload: Upload) => upload.url!.split('/').at(-1)!

function apiErrorOf(error: Error | DetailedError): ApiError {
  const answer = 'originalResponse' in error ? error.originalResponse : null
  if (!answer) return unreachable()
  try {
    return ApiError.fromBody(answer.getStatus(), JSON.parse(answer.getBody()))
  }
  catch {
    return ApiError.fromBody(answer.getStatus(), null)
  }
}
