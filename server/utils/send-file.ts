import { pipeline } from 'node:stream/promises'
import type { H3Event } from 'h3'
import { readSettings } from '../config'
import { storage } from '../services/storage'

export interface SentFile {
  key: string
  bytes: number
  contentType: string
  /** without quotes; the same tag means the same bytes */
  etag: string
  cacheControl: string
  /** offered as the name to save under */
  fileName?: string
}

/** What a stored picture that never changes may be kept for, by the person's own browser only. */
export const privateForever = 'private, max-age=86400, immutable'
/** Kept by the person's own browser, but asked about every time. */
export const privateAskAgain = 'private, no-cache'

/** Streams a stored file: HEAD, If-None-Match, If-Range and one byte range (RFC 9110, clauses 13 and 14). */
export async function sendStoredFile(event: H3Event, file: SentFile): Promise<void> {
  const { res } = event.node
  const etag = `"${file.etag}"`
  setResponseHeaders(event, { 'etag': etag, 'cache-control': file.cacheControl, 'accept-ranges': 'bytes' })
  if (isKnownTo(event, file.etag)) return endWith(event, 304)
  const link = file.fileName && !event.context.headOnly && await presigned(file)
  if (link) {
    setResponseHeaders(event, { 'location': link, 'cache-control': 'no-store' })
    return endWith(event, 302)
  }

  const ifRange = getHeader(event, 'if-range')
  const range = ifRange && ifRange !== etag ? 'whole' : readRange(getHeader(event, 'range'), file.bytes)
  if (range === 'beyond') {
    setResponseHeader(event, 'content-range', `bytes */${file.bytes}`)
    return endWith(event, 416)
  }
  const { start, end } = range === 'whole' ? { start: 0, end: file.bytes - 1 } : range
  const bytes = event.context.headOnly ? null : await storage().read(file.key, { start, end })
  setResponseHeader(event, 'content-type', file.contentType)
  if (file.fileName) setResponseHeader(event, 'content-disposition', contentDisposition(file.fileName))
  if (range !== 'whole') setResponseHeader(event, 'content-range', `bytes ${start}-${end}/${file.bytes}`)
  setResponseHeader(event, 'content-length', end - start + 1)
  if (!bytes) return endWith(event, range === 'whole' ? 200 : 206)
  setResponseStatus(event, range === 'whole' ? 200 : 206)
  // A reader who goes away is no error of ours.
  await pipeline(bytes, res).catch(() => res.destroy())
}

/** Where downloads go on to, once it is clear that this person may have the file. */
function presigned({ key, contentType, fileName }: SentFile): Promise<string | null> | null {
  const seconds = readSettings().S3_LINK_SECONDS
  return seconds > 0 ? storage().link(key, seconds, { contentType, disposition: contentDisposition(fileName!) }) : null
}

/** True when the asker holds these bytes already. */
export function isKnownTo(event: H3Event, etag: string): boolean {
  const held = getHeader(event, 'if-none-match')
  return held !== undefined && held.split(',').some(tag => tag.trim() === '*' || tag.trim().replace(/^W\//, '') === `"${etag}"`)
}

/** For a file whose tag is known before it is looked for. */
export function answerNotModified(event: H3Event, etag: string): void {
  setResponseHeaders(event, { 'etag': `"${etag}"`, 'cache-control': privateAskAgain })
  endWith(event, 304)
}

function endWith(event: H3Event, status: number): void {
  setResponseStatus(event, status)
  event.node.res.end()
}

/** One range of bytes; several at once, another unit or nonsense mean the whole file, as RFC 9110 allows. */
export function readRange(header: string | undefined, bytes: number): 'whole' | 'beyond' | { start: number, end: number } {
  const asked = /^bytes=(\d*)-(\d*)$/.exec(header ?? '')
  if (!asked || (asked[1] === '' && asked[2] === '')) return 'whole'
  const [first, last] = [asked[1]!, asked[2]!]
  if (first === '') return Number(last) === 0 ? 'beyond' : { start: Math.max(0, bytes - Number(last)), end: bytes - 1 }
  if (last !== '' && Number(last) < Number(first)) return 'whole'
  return Number(first) >= bytes ? 'beyond' : { start: Number(first), end: last === '' ? bytes - 1 : Math.min(Number(last), bytes - 1) }
}

/** RFC 6266: a plain name for old readers, the full one in UTF-8. */
export function contentDisposition(fileName: string): string {
  const plain = fileName.normalize('NFKD').replace(/[^\x20-\x7e]/g, '').replace(/["\\%]/g, '_')
  const encoded = encodeURIComponent(fileName).replace(/['()*]/g, c => `%${c.charCodeAt(0).toString(16).toUpperCase()}`)
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`
}
