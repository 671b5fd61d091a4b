import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { crc32 } from 'node:zlib'
import { codedPictureOf, heifFile } from './heif-file'
import { pngChunk, pngHeader, pngSignature } from './png-file'

/**
 * 9900 × 9900 pixels of even grey in 2200 bytes, made once by
 * `sharp({ create: { width: 9900, height: 9900, channels: 3, background: '#777' } }).avif({ effort: 0, quality: 1 })`.
 */
export const hugeAvif = (): Buffer => readFileSync(join(process.cwd(), 'tests/fixtures/98-megapixels.avif'))

export interface Bomb { name: string, bytes: Buffer, /** what it must be refused as */ code: 'picture_too_large' | 'image_unreadable' }

/** Files that are small and ask for much. `heic` is a sound picture of one tile. */
export function bombs(heic: Buffer): Bomb[] {
  const tile = codedPictureOf(heic), huge = codedPictureOf(hugeAvif())
  const tooLarge = 'picture_too_large'
  return [
    { name: 'AVIF of 98 megapixels', bytes: hugeAvif(), code: tooLarge },
    { name: 'AVIF of 98 megapixels that claims 64 × 64', bytes: heifFile({ tile: huge, claimed: [64, 64] }), code: tooLarge },
    { name: 'HEIC that claims 30 000 × 30 000', bytes: heifFile({ tile, claimed: [30_000, 30_000] }), code: tooLarge },
    { name: 'HEIC grid of 16 384 tiles', bytes: heifFile({ tile, grid: { rows: 128, columns: 128 } }), code: tooLarge },
    { name: 'HEIC grid of 16 384 tiles that claims 64 × 64', bytes: heifFile({ tile, grid: { rows: 128, columns: 128, claimed: [64, 64] } }), code: tooLarge },
    { name: 'HEIC grid whose canvas is 60 000 × 60 000', bytes: heifFile({ tile, grid: { rows: 2, columns: 2, width: 60_000, height: 60_000, claimed: [64, 64] } }), code: tooLarge },
    { name: 'AVIF grid of 16 pictures of 98 megapixels that claims 64 × 64', bytes: heifFile({ tile: huge, claimed: [64, 64], grid: { rows: 4, columns: 4, width: 64, height: 64 } }), code: tooLarge },
    { name: 'PNG header of 2³¹ − 1 pixels a side', bytes: Buffer.concat([pngSignature, pngHeader(2 ** 31 - 1, 2 ** 31 - 1, 16, 6), pngChunk('IDAT', Buffer.alloc(10)), pngChunk('IEND')]), code: tooLarge },
    { name: 'WebP whose canvas is 16 384 × 16 384', bytes: webpCanvas(16_384, 16_384), code: tooLarge },
    { name: 'TIFF of 20 000 directories', bytes: tiffChain(20_000), code: 'image_unreadable' },
    { name: 'TIFF whose directories go in a circle', bytes: tiffChain(3, true), code: 'image_unreadable' },
    { name: 'TIFF with a tile of 2³⁰ pixels a side', bytes: tiffWith([[322, 2 ** 30], [323, 2 ** 30]]), code: 'image_unreadable' },
    { name: 'TIFF of 65 000 channels', bytes: tiffWith([[277, 65_000]]), code: 'image_unreadable' },
  ]
}

/** A PNG with a text chunk of so many bytes before its picture, piece by piece. */
export function* longTextPng(bytes: number): Generator<Buffer> {
  const head = Buffer.alloc(8)
  head.writeUInt32BE(bytes)
  head.write('tEXt', 4, 'latin1')
  yield Buffer.concat([pngSignature, pngHeader(5, 5, 8, 0), head])
  const piece = Buffer.alloc(1 << 20, 'a')
  let check = crc32(head.subarray(4))
  for (let left = bytes; left > 0; left -= piece.length) {
    const part = piece.subarray(0, Math.min(left, piece.length))
    check = crc32(part, check)
    yield part
  }
  const tail = Buffer.alloc(4)
  tail.writeUInt32BE(check)
  yield Buffer.concat([tail, pngChunk('IDAT', Buffer.alloc(10)), pngChunk('IEND')])
}

function webpCanvas(width: number, height: number): Buffer {
  const bytes = Buffer.alloc(40)
  bytes.write('RIFF\0\0\0\0WEBPVP8X', 'latin1')
  bytes.writeUInt32LE(32, 4)
  bytes.writeUInt32LE(10, 16)
  bytes.writeUIntLE(width - 1, 24, 3)
  bytes.writeUIntLE(height - 1, 27, 3)
  bytes.write('VP8L', 30, 'latin1')
  return bytes
}

type Tag = [tag: number, value: number]
/** One strip of 4 × 4 grey pixels at byte 8. */
const plain: Tag[] = [[256, 4], [257, 4], [258, 8], [259, 1], [262, 1], [273, 8], [277, 1], [278, 4], [279, 16]]

function directory(tags: Tag[], next: number): Buffer {
  const bytes = Buffer.alloc(2 + 12 * tags.length + 4)
  bytes.writeUInt16LE(tags.length)
  tags.sort(([a], [b]) => a - b).forEach(([tag, value], i) => {
    bytes.writeUInt16LE(tag, 2 + 12 * i)
    bytes.writeUInt16LE(4, 4 + 12 * i)
    bytes.writeUInt32LE(1, 6 + 12 * i)
    bytes.writeUInt32LE(value, 10 + 12 * i)
  })
  bytes.writeUInt32LE(next, bytes.length - 4)
  return bytes
}

const tiffStart = Buffer.from('II*\0\x18\0\0\0aaaabbbbccccdddd', 'latin1')
const tiffWith = (changes: Tag[]): Buffer => Buffer.concat([tiffStart, directory([...plain.filter(([tag]) => !changes.some(([changed]) => changed === tag)), ...changes], 0)])

function tiffChain(length: number, circle = false): Buffer {
  const size = 2 + 12 * plain.length + 4
  return Buffer.concat([tiffStart, ...Array.from({ length }, (_, i) => directory([...plain], i + 1 < length ? 24 + (i + 1) * size : circle ? 24 : 0))])
}
