import { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import type { ReadableStream } from 'node:stream/web'
import { makeZip } from 'client-zip'
import type { H3Event } from 'h3'
import type { ArchiveFile } from '../services/take-along'
import { contentDisposition } from './send-file'

/** Streams files as a ZIP archive while they come: one is open at a time, and nothing is kept in memory. */
export async function sendZip(event: H3Event, files: AsyncIterable<ArchiveFile>, fileName: string): Promise<void> {
  setResponseHeaders(event, { 'content-type': 'application/zip', 'content-disposition': contentDisposition(fileName) })
  const { res } = event.node
  if (event.context.headOnly) return void res.end()
  // A reader who goes away is no error of ours; a broken archive must not look whole.
  await pipeline(Readable.fromWeb(makeZip(files, { buffersAreUTF8: true }) as ReadableStream), res).catch(() => res.destroy())
}
