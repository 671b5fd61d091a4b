import { createHash } from 'node:crypto'
import { createWriteStream } from 'node:fs'
import type { IncomingMessage } from 'node:http'
import type { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import busboy from 'busboy'
import type { H3Event } from 'h3'
import { ComputeError, type ErrorCode } from '#shared/errors'
import type { Arrival } from '../services/photo-intake'
import type { TemporaryFile } from '../storage'
import { bePatientWith } from './patience'

export interface ReceivingRules {
  /** name of the parts that are taken */
  field: string
  maxFiles: number
  maxFileBytes: number
  newId: () => string
  openTemporary: (id: string) => Promise<TemporaryFile>
  /** called for each piece before it is written; throws when there is no more room */
  takeRoom: (bytes: number) => Promise<void> | void
  /** hears the parts that are no files */
  onField?: (name: string, value: string) => void
}

/**
 * Streams the file parts of a multipart body to temporary files, hashing on the way: memory stays at a few pieces.
 * Comes back when the whole body is there. A body that breaks off or is malformed throws, and leaves no file.
 */
export async function receiveFiles(event: H3Event, rules: ReceivingRules): Promise<Arrival[]> {
  const request = event.node.req
  const form = openForm(request, rules)
  const arriving: Promise<Arrival>[] = []
  let before: Promise<unknown> = Promise.resolve()
  form.on('file', (field, stream, { filename }) => {
    const fileName = filename ?? ''
    // The stream may fail while it waits for its turn, or while its temporary file is still being opened.
    stream.on('error', () => {})
    // One after the other, as they were sent: where room ends, it ends for the later ones.
    const arrival = before.then(() => field === rules.field ? receiveOne(stream, fileName, rules) : refuseOne(stream, fileName, rules.field))
    before = arrival.catch(() => {})
    arriving.push(arrival)
  })
  form.on('field', (name, value) => rules.onField?.(name, value))
  let tooMany = false
  form.on('filesLimit', () => tooMany = true)

  const whole = await feed(request, form).then(() => undefined, (error: Error) => error)
  const settled = await Promise.allSettled(arriving)
  const received = settled.flatMap(s => s.status === 'fulfilled' ? [s.value] : [])
  const failure = whole ?? settled.find(s => s.status === 'rejected')?.reason as Error | undefined
  if (failure) {
    await discardAll(received)
    throw failure
  }
  if (tooMany) received.push(refused('', 'invalid_input', `At most ${rules.maxFiles} pictures at once: the rest was left out. Send it in another go.`))
  return received
}

export const discardAll = (files: Arrival[]): Promise<unknown> => Promise.all(files.map(f => f.file?.discard()))

function openForm(request: IncomingMessage, rules: ReceivingRules): busboy.Busboy {
  if (!/^multipart\/form-data\b/i.test(request.headers['content-type'] ?? '')) {
    throw new ComputeError('unsupported_media', `Send the pictures as multipart/form-data, each as a part named \`${rules.field}\`.`)
  }
  try {
    return busboy({ headers: request.headers, defParamCharset: 'utf8', limits: { files: rules.maxFiles, fileSize: rules.maxFileBytes, fields: 20, fieldSize: 1000, headerPairs: 50 } })
  }
  catch {
    throw malformed()
  }
}

const malformed = () => new ComputeError('malformed_body', 'The upload is incomplete or malformed. Send it again.')

/** Resolves when the form has ended; a sender who goes away or writes nonsense rejects. */
function feed(request: IncomingMessage, form: busboy.Busboy): Promise<void> {
  const calm = bePatientWith(request)
  return new Promise<void>((resolve, reject) => {
    const cut = () => { if (!request.complete) form.destroy(malformed()) }
    request.once('close', cut)
    const settle = (end: () => void) => {
      request.off('close', cut)
      calm()
      end()
    }
    form.once('close', () => settle(resolve))
    form.once('error', () => settle(() => {
      request.unpipe(form)
      request.resume()
      reject(malformed())
    }))
    request.pipe(form)
  })
}

type FileStream = Readable & { truncated?: boolean }

async function receiveOne(stream: FileStream, fileName: string, rules: ReceivingRules): Promise<Arrival> {
  const id = rules.newId()
  const file = await rules.openTemporary(id)
  const hash = createHash('sha256')
  let bytes = 0
  let refusal: ComputeError | undefined
  const take = async function* (pieces: AsyncIterable<Buffer>) {
    for await (const piece of pieces) {
      // What is refused is still read to its end: the parts after it may be good.
      if (refusal) continue
      try {
        await rules.takeRoom(piece.length)
      }
      catch (error) {
        if (!(error instanceof ComputeError)) throw error
        refusal = error
        continue
      }
      hash.update(piece)
      bytes += piece.length
      yield piece
    }
  }
  try {
    await pipeline(stream, take, createWriteStream(file.path))
  }
  catch (error) {
    await file.discard()
    throw outOfSpace(error) ? new ComputeError('disk_full', 'The disk is full. Nothing was stored; tell the studio’s owner.') : error
  }
  if (stream.truncated) refusal = new ComputeError('file_too_large', `This file is larger than ${Math.round(rules.maxFileBytes / 1e6)} MB, the most that is taken.`)
  else if (bytes === 0) refusal ??= new ComputeError('not_an_image', 'This file is empty (0 bytes). Choose the picture again.')
  if (refusal) await file.discard()
  return { id, fileName, bytes, sha256: hash.digest('hex'), file, refusal }
}

async function refuseOne(stream: FileStream, fileName: string, wantedField: string): Promise<Arrival> {
  stream.resume()
  return refused(fileName, 'invalid_input', `Send each picture as a part named \`${wantedField}\`.`)
}

const refused = (fileName: string, code: ErrorCode, message: string): Arrival =>
  ({ id: '', fileName, bytes: 0, sha256: '', refusal: new ComputeError(code, message) })

const outOfSpace = (error: unknown): boolean => (error as NodeJS.ErrnoException).code === 'ENOSPC'
