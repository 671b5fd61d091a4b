import type { PictureHeader } from './header'

/** Exif 2.32: tags of IFD 0 and of the Exif IFD that it points to. */
const orientationTag = 274, exifPointerTag = 34665
const lensTags = [33437, 34850, 37386] // FNumber, ExposureProgram, FocalLength
export const fileSourceTag = 41728

export type ExifFacts = Pick<PictureHeader, 'orientation' | 'device'>
const nothing: ExifFacts = { orientation: 1, device: null }

/**
 * Orientation and device from an Exif block that starts with its TIFF header. A camera notes its lens; FileSource says
 * scanner in so many words. Anything malformed counts as not there: pictures with broken Exif are common and otherwise sound.
 */
export function readExif(exif: Buffer): ExifFacts {
  const byteOrder = exif.toString('latin1', 0, 2)
  if (exif.length < 14 || (byteOrder !== 'II' && byteOrder !== 'MM')) return nothing
  const little = byteOrder === 'II'
  const main = readDirectory(exif, little, little ? exif.readUInt32LE(4) : exif.readUInt32BE(4))
  const orientation = main.get(orientationTag)?.short ?? 1
  const pointer = main.get(exifPointerTag)?.long
  const taking = pointer === undefined ? new Map<number, Entry>() : readDirectory(exif, little, pointer)
  return { orientation: orientation >= 1 && orientation <= 8 ? orientation : 1, device: deviceOf(taking, taking.get(fileSourceTag)?.byte) }
}

/** From the tags of an Exif IFD and the value of FileSource (1 transparency scanner, 2 reflection scanner). */
export function deviceOf(tags: { has: (tag: number) => boolean }, fileSource: number | undefined): ExifFacts['device'] {
  if (fileSource === 1 || fileSource === 2) return 'scanner'
  return lensTags.some(tag => tags.has(tag)) ? 'camera' : null
}

/** An entry's value field, read as each of the widths that are needed. */
interface Entry { byte: number, short: number, long: number }

function readDirectory(exif: Buffer, little: boolean, offset: number): Map<number, Entry> {
  const u16 = (at: number) => little ? exif.readUInt16LE(at) : exif.readUInt16BE(at)
  const u32 = (at: number) => little ? exif.readUInt32LE(at) : exif.readUInt32BE(at)
  const entries = new Map<number, Entry>()
  if (offset + 2 > exif.length) return entries
  for (let i = 0, at = offset + 2; i < u16(offset) && at + 12 <= exif.length; i++, at += 12) {
    entries.set(u16(at), { byte: exif[at + 8]!, short: u16(at + 8), long: u32(at + 8) })
  }
  return entries
}
