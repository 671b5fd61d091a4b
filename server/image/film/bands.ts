import { constants, deflate, deflateRaw, type ZlibOptions } from 'node:zlib'
import type { FilmRows } from './compose'

/** How a file kind writes one row of film codes into its band of bytes. */
export interface RowCoder {
  bytesPerRow: number
  encode(row: Uint16Array, to: Buffer, at: number): void
}

export interface Band {
  rows: number
  bytes: number
  deflated: Buffer
  /** Adler-32 of the band, where asked for */
  checksum: number
}

/**
 * Runs and single bytes only (RFC 1951 through zlib's `Z_RLE`): neighbours in a photograph's differences hardly repeat,
 * so that searching for longer repeats costs three times the time and saves under two per cent.
 */
const compression: ZlibOptions = { level: 1, strategy: constants.Z_RLE, memLevel: 9 }
const bandBytes = 1 << 20
const bandsInFlight = 4

type Deflate = (bytes: Buffer, options: ZlibOptions, done: (error: Error | null, result: Buffer) => void) => void

/** One piece out: with zlib's small default pieces a busy main thread would hold up the compressing ones. */
const compress = (way: Deflate, bytes: Buffer, options: ZlibOptions) => new Promise<Buffer>((resolve, reject) =>
  way(bytes, { ...options, chunkSize: bytes.length + (bytes.length >> 8) + 1024 }, (error, result) => error ? reject(error) : resolve(result)))

/** zlib computes the checksum fastest; level 0 copies the bytes and ends with it. */
async function adlerOf(bytes: Buffer): Promise<number> {
  const copied = await compress(deflate, bytes, { level: 0 })
  return copied.readUInt32BE(copied.length - 4)
}

const whole = async (bytes: Buffer) => ({ deflated: await compress(deflate, bytes, compression), checksum: 0 })

async function asPart(bytes: Buffer) {
  const [deflated, checksum] = await Promise.all([compress(deflateRaw, bytes, { ...compression, finishFlush: constants.Z_SYNC_FLUSH }), adlerOf(bytes)])
  return { deflated, checksum }
}

export const rowsPerBand = (bytesPerRow: number) => Math.max(1, Math.floor(bandBytes / bytesPerRow))

/**
 * Codes rows in bands and deflates a few bands at once on the process's threads; bands come in order. Memory is bounded by
 * the bands in flight. `parts`: pieces of one stream that end on byte borders, else each a stream of its own.
 */
export async function* deflatedBands(rows: FilmRows, height: number, coder: RowCoder, kind: 'streams' | 'parts'): AsyncGenerator<Band> {
  const perBand = rowsPerBand(coder.bytesPerRow)
  const inFlight: Promise<Band>[] = []
  const free: Buffer[] = []
  for (let y = 0; y < height; y += perBand) {
    const count = Math.min(perBand, height - y)
    const buffer = free.pop() ?? Buffer.allocUnsafe(perBand * coder.bytesPerRow)
    for (let i = 0; i < count; i++) {
      const next = rows.next()
      if (next.done) throw new Error(`the film ended before line ${y + i}`)
      coder.encode(next.value, buffer, i * coder.bytesPerRow)
    }
    const bytes = buffer.subarray(0, count * coder.bytesPerRow)
    const band = (kind === 'parts' ? asPart : whole)(bytes).then((result) => {
      free.push(buffer)
      return { rows: count, bytes: bytes.length, ...result }
    })
    band.catch(() => {})
    inFlight.push(band)
    if (inFlight.length === bandsInFlight) yield await inFlight.shift()!
  }
  while (inFlight.length > 0) yield await inFlight.shift()!
}

const adlerBase = 65521

/** Adler-32 of two pieces laid end to end, from theirs (RFC 1950, 8.2). */
export function joinChecksums(first: number, second: number, secondBytes: number): number {
  const a1 = first & 0xFFFF, b1 = first >>> 16, a2 = second & 0xFFFF, b2 = second >>> 16
  const a = (a1 + a2 - 1 + adlerBase) % adlerBase
  const b = (b1 + b2 + (secondBytes % adlerBase) * (a1 - 1 + adlerBase)) % adlerBase
  return ((b << 16) | a) >>> 0
}

/** What stands before and after the parts of one zlib stream (RFC 1950): header; an empty last block and the checksum. */
export const streamHead = Buffer.from([0x78, 0x01])
export function streamTail(checksum: number): Buffer {
  const tail = Buffer.from([0x03, 0x00, 0, 0, 0, 0])
  tail.writeUInt32BE(checksum, 2)
  return tail
}
