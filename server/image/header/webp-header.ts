import type { PictureNote } from '#shared/schemas/picture-formats'
import { type ExifFacts, readExif } from './exif'
import type { FileWindow } from './file-window'
import { type PictureHeader, profileMaxBytes, unreadable } from './header'

export const isWebp = (start: Buffer): boolean => start.length >= 16 && start.toString('latin1', 0, 4) === 'RIFF' && start.toString('latin1', 8, 12) === 'WEBP'

/** More chunks than a still picture has; the frames of a long animation are not walked through. */
const mostChunks = 1000

interface Sides { width: number, height: number }
const u24 = (b: Buffer, at: number) => b.readUIntLE(at, 3)

/** RFC 9649: VP8X canvas and flags (2.7), the frame's own sides (2.5, 2.6), profile and Exif, which may stand after the picture. */
export async function readWebpHeader(window: FileWindow): Promise<PictureHeader> {
  let canvas: Sides | undefined, frame: Sides | undefined
  let icc: Buffer | null = null
  let alpha = false
  let exif: ExifFacts = { orientation: 1, device: null }
  const notes: PictureNote[] = []
  for (let offset = 12, chunk = 0; chunk < mostChunks; chunk++) {
    const head = await window.bytes(offset, 8)
    if (head.length < 8) break
    const type = head.toString('latin1', 0, 4), length = head.readUInt32LE(4), body = offset + 8
    if (type === 'VP8X') {
      const bytes = await window.bytes(body, 10)
      if (bytes.length < 10) break
      canvas = { width: u24(bytes, 4) + 1, height: u24(bytes, 7) + 1 }
      alpha ||= (bytes[0]! & 0x10) !== 0
      if (bytes[0]! & 0x02) notes.push('animation')
    }
    if (type === 'VP8 ') frame ??= lossySides(await window.bytes(body, 10))
    if (type === 'VP8L') {
      const bytes = await window.bytes(body, 5)
      frame ??= losslessSides(bytes)
      alpha ||= bytes.length === 5 && (bytes[4]! & 0x10) !== 0
    }
    if (type === 'ICCP' && length <= profileMaxBytes) icc = Buffer.from(await window.bytes(body, length))
    if (type === 'EXIF' && length <= 1_000_000) exif = readExif(withoutPrefix(await window.bytes(body, length)))
    offset = body + length + length % 2
  }
  const sides = canvas ?? frame
  if (!sides || sides.width === 0 || sides.height === 0) throw unreadable('its header makes no sense')
  const coded = frame && frame.width * frame.height > sides.width * sides.height ? { codedPixels: frame.width * frame.height } : {}
  return { format: 'webp', ...sides, ...coded, bitDepth: 8, colour: 'rgb', alpha, progressive: false, icc, ...exif, notes }
}

/** RFC 6386, 9.1: a key frame's start code, then 14 bits each. */
function lossySides(bytes: Buffer): Sides | undefined {
  if (bytes.length < 10 || bytes.readUIntBE(3, 3) !== 0x9D012A) return undefined
  return { width: bytes.readUInt16LE(6) & 0x3FFF, height: bytes.readUInt16LE(8) & 0x3FFF }
}

/** RFC 9649, 3.4: signature 0x2F, then 14 bits each, less one. */
function losslessSides(bytes: Buffer): Sides | undefined {
  if (bytes.length < 5 || bytes[0] !== 0x2F) return undefined
  const bits = bytes.readUInt32LE(1)
  return { width: (bits & 0x3FFF) + 1, height: (bits >>> 14 & 0x3FFF) + 1 }
}

/** Some writers put JPEG's prefix before the Exif block. */
const withoutPrefix = (exif: Buffer): Buffer => exif.toString('latin1', 0, 6) === 'Exif\0\0' ? exif.subarray(6) : exif
