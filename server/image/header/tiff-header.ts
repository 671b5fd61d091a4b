import { deviceOf, fileSourceTag } from './exif'
import type { FileWindow } from './file-window'
import { type PictureHeader, profileMaxBytes, unreadable } from './header'

// TIFF 6.0 (sections 2, 8 and 18); the ICC profile's tag is ICC.1:2022 annex B.5, the Exif directory's Exif 2.32, 4.6.3.
const tags = {
  subfileType: 254, width: 256, height: 257, bitsPerSample: 258, photometric: 262, orientation: 274, samplesPerPixel: 277, tileWidth: 322, tileHeight: 323, extraSamples: 338, sampleFormat: 339, icc: 34675, exif: 34665,
} as const
/** Bytes of a value by its type: BYTE, ASCII, SHORT, LONG, RATIONAL, SBYTE, UNDEFINED. */
const bytesOfType: Record<number, number> = { 1: 1, 2: 1, 3: 2, 4: 4, 5: 8, 6: 1, 7: 1 }
const mostEntries = 1000
const mostDirectories = 200
/** A tile is decoded as a whole, however little of the picture it holds. */
const tileMaxPixels = 64_000_000

/** PhotometricInterpretation → colour; CIELAB, YCbCr outside JPEG and raw sensors are not read. */
const colours: Record<number, PictureHeader['colour']> = { 0: 'grey', 1: 'grey', 2: 'rgb', 3: 'rgb', 5: 'cmyk', 6: 'rgb' }

interface Field { type: number, count: number, at: number }

/** Reads the first picture of a TIFF file: its directory may stand anywhere in the file. */
export async function readTiffHeader(window: FileWindow): Promise<PictureHeader> {
  const start = await window.bytes(0, 8)
  const little = start.toString('latin1', 0, 2) === 'II'
  const u16 = (b: Buffer, at: number) => little ? b.readUInt16LE(at) : b.readUInt16BE(at)
  const u32 = (b: Buffer, at: number) => little ? b.readUInt32LE(at) : b.readUInt32BE(at)
  const directory = u32(start, 4)
  const fields = await readDirectory(window, directory, u16, u32)

  const values = async (tag: number, most: number): Promise<number[]> => {
    const field = fields.get(tag)
    const size = field && bytesOfType[field.type]
    if (!field || !size) return []
    const count = Math.min(field.count, most)
    const bytes = await window.bytes(await placeOf(window, field, size, u32), count * size)
    if (bytes.length < count * size) throw unreadable('it is cut off')
    return Array.from({ length: count }, (_, i) => size === 1 ? bytes[i]! : size === 2 ? u16(bytes, 2 * i) : u32(bytes, 4 * i))
  }
  const [width = 0] = await values(tags.width, 1), [height = 0] = await values(tags.height, 1)
  const [photometric = -1] = await values(tags.photometric, 1)
  const depths = await values(tags.bitsPerSample, 8), [format = 1] = await values(tags.sampleFormat, 1)
  const colour = colours[photometric]
  if (width === 0 || height === 0) throw unreadable('its header makes no sense')
  if (!colour) throw unreadable('its colours are stored in a rare way (export it as RGB or grey)')
  const depth = Math.max(1, ...depths)
  if (format !== 1 || ![1, 2, 4, 8, 16].includes(depth)) throw unreadable(`it is stored in a rare kind of TIFF (${depth} bits; export it with 8 or 16)`)
  const [samples = 1] = await values(tags.samplesPerPixel, 1)
  const inks = colour === 'cmyk' ? 4 : colour === 'grey' || photometric === 3 ? 1 : 3
  if (samples < inks || samples > inks + 1) throw unreadable(`it has ${samples} channels (export it with ${inks}, or one more for transparency)`)
  if (photometric === 5 && depth !== 8) throw unreadable('it is a CMYK TIFF of 16 bits (export it with 8 bits, or as RGB)')
  const [tileWidth = 0] = await values(tags.tileWidth, 1), [tileHeight = 0] = await values(tags.tileHeight, 1)
  if (tileWidth * tileHeight > tileMaxPixels) throw unreadable('its tiles are too large')
  const [orientation = 1] = await values(tags.orientation, 1), [exif] = await values(tags.exif, 1)
  return {
    format: 'tiff', width, height, colour, bitDepth: depth === 16 ? 16 : 8, alpha: samples > inks,
    progressive: false, icc: await profileOf(window, fields.get(tags.icc), u32), orientation: orientation >= 1 && orientation <= 8 ? orientation : 1,
    notes: await hasMore(window, directory, u16, u32) ? ['several_pictures'] : [],
    device: exif === undefined ? null : await readDirectory(window, exif, u16, u32).then(taking => deviceIn(window, taking), () => null),
  }
}

/**
 * Whether another picture follows that is no smaller copy of the first (NewSubfileType, bit 0). The decoder walks through all
 * directories before it begins, in a time that grows with their square: a long chain, or one that goes in a circle, is refused.
 */
async function hasMore(window: FileWindow, first: number, u16: (b: Buffer, at: number) => number, u32: (b: Buffer, at: number) => number): Promise<boolean> {
  const nextAfter = async (directory: number): Promise<number> => {
    const count = await window.bytes(directory, 2)
    const link = count.length === 2 ? await window.bytes(directory + 2 + 12 * u16(count, 0), 4) : count
    return link.length === 4 ? u32(link, 0) : 0
  }
  const seen = new Set([first])
  const second = await nextAfter(first)
  for (let next = second; next !== 0; next = await nextAfter(next)) {
    if (seen.has(next) || seen.size >= mostDirectories) throw unreadable(`it holds more than ${mostDirectories} pictures`)
    seen.add(next)
  }
  const fields = second === 0 ? null : await readDirectory(window, second, u16, u32).catch(() => null)
  const kind = fields?.get(tags.subfileType)
  return fields !== null && (!kind || (u32(await window.bytes(kind.at, 4), 0) & 1) === 0)
}

async function deviceIn(window: FileWindow, taking: Map<number, Field>): Promise<PictureHeader['device']> {
  const source = taking.get(fileSourceTag)
  return deviceOf(taking, source && (await window.bytes(source.at, 1))[0])
}

async function readDirectory(window: FileWindow, offset: number, u16: (b: Buffer, at: number) => number, u32: (b: Buffer, at: number) => number): Promise<Map<number, Field>> {
  const head = await window.bytes(offset, 2)
  if (head.length < 2) throw unreadable('it is cut off')
  const count = u16(head, 0)
  const body = await window.bytes(offset + 2, 12 * count)
  if (count === 0 || count > mostEntries || body.length < 12 * count) throw unreadable('its header makes no sense')
  return new Map(Array.from({ length: count }, (_, i): [number, Field] => [u16(body, 12 * i), { type: u16(body, 12 * i + 2), count: u32(body, 12 * i + 4), at: offset + 2 + 12 * i + 8 }]))
}

/** A value of four bytes stands in its entry, a longer one where the entry says. */
async function placeOf(window: FileWindow, { count, at }: Field, size: number, u32: (b: Buffer, at: number) => number): Promise<number> {
  return count * size <= 4 ? at : u32(await window.bytes(at, 4), 0)
}

async function profileOf(window: FileWindow, field: Field | undefined, u32: (b: Buffer, at: number) => number): Promise<Buffer | null> {
  if (!field || field.count <= 4) return null
  if (field.count > profileMaxBytes) throw unreadable('its colour profile is too long')
  const bytes = await window.bytes(await placeOf(window, field, 1, u32), field.count)
  return bytes.length === field.count ? Buffer.from(bytes) : null
}
