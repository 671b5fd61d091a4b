import { PassThrough, Readable } from 'node:stream'
import { Server } from '@tus/server'
import { setResponseHeader, setResponseStatus, type H3Event } from 'h3'
import { ComputeError } from '#shared/errors'
import { limits } from '#shared/schemas/limits'
import type { StudioAccess } from '../services/access'
import { finishUpload } from '../services/upload-intake'
import { newUploadId } from '../services/uploads'
import { PartStore } from './part-store'
import { bePatientWith } from './patience'
import { openUploadLocks } from './upload-locks'

const locker = openUploadLocks()
/** A request that is asked to let its upload go first keeps what it has, for so long. */
const drainMs = 1000

/**
 * Answers a request of the resumable protocol by its library, for one person's uploads in one studio. The answer's headers
 * are the protocol's; errors are thrown, so that they come in the contract's shape.
 */
export async function answerTus(event: H3Event, studio: StudioAccess, uploadId?: string): Promise<'' | null> {
  let thrown: unknown
  const protocol = new Server({
    path: `/api/studios/${studio.id}/uploads`, relativeLocation: true, allowedOrigins: [],
    datastore: new PartStore(studio), locker, lockDrainTimeout: drainMs, maxSize: limits.fileMaxBytes,
    namingFunction: newUploadId,
    getFileIdFromRequest: () => uploadId,
    onUploadFinish: async (_, { id }) => {
      await finishUpload(studio, id)
      return {}
    },
    onResponseError: (_, error) => void (thrown = error),
  })
  const calm = bePatientWith(event.node.req)
  const { request, letGo } = webRequestOf(event)
  try {
    const answer = await protocol.handleWeb(request)
    tellHeaders(event, answer.headers)
    if (answer.status >= 400) throw refusalOf(answer.status, thrown)
    setResponseStatus(event, answer.status)
    return answer.status === 204 ? null : ''
  }
  finally {
    letGo()
    calm()
  }
}

/** The request as the library takes it. When it is let go, what its sender still sends is read on and forgotten, so that a refused one hears why. */
function webRequestOf(event: H3Event) {
  const { req, res } = event.node
  const hasBody = event.method === 'PATCH' || event.method === 'POST'
  const body = new PassThrough()
  body.on('error', () => {}) // a cut shows in the request itself
  const cut = () => { if (!req.complete) body.destroy(new Error('The sender has gone.')) }
  if (hasBody) req.once('close', cut).pipe(body)
  const headers = Object.entries(req.headers).flatMap(([name, value]) => typeof value === 'string' ? [[name, value] as [string, string]] : [])
  const init = { method: event.method, headers, ...hasBody ? { body: Readable.toWeb(body) as BodyInit, duplex: 'half' } : {} }
  return {
    // The library listens to Node's own request too: it keeps what has come when the connection is cut.
    request: Object.assign(new Request(new URL(event.path, 'http://uploads.invalid'), init), { runtime: { name: 'node', node: { req, res } } }) as Parameters<Server['handleWeb']>[0],
    letGo() {
      req.off('close', cut)
      req.unpipe(body)
      req.resume()
    },
  }
}

function tellHeaders(event: H3Event, headers: Headers): void {
  headers.forEach((value, name) => {
    if (/^(?:tus-|upload-|location$)/.test(name)) setResponseHeader(event, name, value)
  })
}

/** The library's own refusals by their status; what our part of it threw comes through as it is. */
function refusalOf(status: number, thrown: unknown): unknown {
  if (thrown instanceof Error) return thrown
  switch (status) {
    case 404: case 410: return new ComputeError('not_found', 'There is no such upload, or its time is up. Send the file again.')
    case 409: return new ComputeError('wrong_offset', 'The bytes don’t begin where the upload has ended. Ask for its offset and go on from there.')
    case 412: return new ComputeError('upload_protocol', 'Send the header `Tus-Resumable: 1.0.0`.')
    case 413: return new ComputeError('file_too_large', `More was sent than was announced, or than the ${Math.round(limits.fileMaxBytes / 1e6)} MB that are taken.`)
    case 500: return new ComputeError('unavailable', 'Another request still holds this upload. Try again in a moment.')
    default: return new ComputeError('malformed_body', 'The headers of the upload are missing or malformed.')
  }
}
