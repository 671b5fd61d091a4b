import type { PictureNote } from '#shared/schemas/picture-formats'
import { type ExifFacts, readExif } from './exif'
import type { FileWindow } from './file-window'
import { metadataMaxBytes, type PictureHeader, profileMaxBytes, unreadable } from './header'

// ISO/IEC 10918-1 (JPEG) table B.1: marker codes.
const startOfScan = 0xDA, endOfImage = 0xD9, app1 = 0xE1, app2 = 0xE2
const isFrame = (marker: number) => marker >= 0xC0 && marker <= 0xCF && ![0xC4, 0xC8, 0xCC].includes(marker)
const isAlone = (marker: number) => marker === 0x01 || (marker >= 0xD0 && marker <= 0xD7)

type Frame = Pick<PictureHeader, 'width' | 'height' | 'colour' | 'progressive'>

function readFrame(marker: number, body: Buffer): Frame {
  if (body.length < 6) throw unreadable('its header is cut off')
  if (marker > 0xC2) throw unreadable('it is stored in a rare kind of JPEG (lossless or arithmetic coding)')
  if (body[0] !== 8) throw unreadable(`it is stored in a rare kind of JPEG (${body[0]} bits)`)
  const components = body[5]!
  const colour = ({ 1: 'grey', 3: 'rgb', 4: 'cmyk' } as const)[components]
  const height = body.readUInt16BE(1), width = body.readUInt16BE(3)
  if (!colour || width === 0 || height === 0) throw unreadable('its header makes no sense')
  return { width, height, colour, progressive: marker === 0xC2 }
}

/** Pieces of an ICC profile in APP2 segments, numbered from 1 (ICC.1:2022 annex B.4). */
class ProfilePieces {
  private readonly pieces: Buffer[] = []
  private bytes = 0

  add(body: Buffer) {
    if (body.toString('latin1', 0, 12) !== 'ICC_PROFILE\0' || body.length < 14) return
    const piece = Buffer.from(body.subarray(14))
    this.bytes += piece.length
    if (this.bytes > profileMaxBytes) throw unreadable('its colour profile is too long')
    this.pieces[body[12]!] = piece
  }

  whole(): Buffer | null {
    const joined = Buffer.concat(this.pieces.filter(piece => piece !== undefined))
    return joined.length > 0 ? joined : null
  }
}

/**
 * Application segments that tell of more than the one picture: a gain map (ISO 21496-1 or its forerunners' XMP), a film after it,
 * or further pictures (CIPA DC-007, Multi-Picture Format). Only the first picture is ever decoded.
 */
function noteOf(marker: number, body: Buffer): PictureNote | undefined {
  const start = body.toString('latin1', 0, 28)
  if (marker === app2) return start.startsWith('urn:iso:std:iso:ts:21496:-1') ? 'gain_map' : start.startsWith('MPF\0') ? 'several_pictures' : undefined
  if (!start.startsWith('http://ns.adobe.com/xap/1.0/')) return undefined
  const xmp = body.toString('latin1')
  if (/hdrgm:Version|HDRGainMap/.test(xmp)) return 'gain_map'
  return /(?:MotionPhoto|MicroVideo)="1"/.test(xmp) ? 'motion' : undefined
}

/** The second picture of one with a gain map is that map. */
const withoutRepeats = (notes: Set<PictureNote>): PictureNote[] => [...notes].filter(note => note !== 'several_pictures' || !notes.has('gain_map'))

/** Walks the segments up to the first scan; long ones are stepped over, never loaded. */
export async function readJpegHeader(window: FileWindow): Promise<PictureHeader> {
  const profile = new ProfilePieces()
  let exif: ExifFacts = { orientation: 1, device: null }
  const notes = new Set<PictureNote>()
  let frame: Frame | undefined
  for (let offset = 2; ;) {
    const head = await window.bytes(offset, 4)
    if (head.length < 4) throw unreadable('it is cut off')
    if (head[0] !== 0xFF) throw unreadable('its header makes no sense')
    const marker = head[1]!
    if (marker === 0xFF) { offset += 1; continue }
    if (isAlone(marker)) { offset += 2; continue }
    if (marker === endOfImage) throw unreadable('there is no picture in it')
    if (marker === startOfScan) break
    const length = head.readUInt16BE(2)
    if (length < 2) throw unreadable('its header makes no sense')
    if (isFrame(marker)) frame = readFrame(marker, await window.bytes(offset + 4, length - 2))
    if (marker === app1 || marker === app2) {
      const body = await window.bytes(offset + 4, length - 2)
      if (marker === app2) profile.add(body)
      else if (body.toString('latin1', 0, 6) === 'Exif\0\0') exif = readExif(body.subarray(6))
      const note = noteOf(marker, body)
      if (note) notes.add(note)
    }
    offset += 2 + length
    if (offset > metadataMaxBytes) throw unreadable('there is too much beside the picture in it')
  }
  if (!frame) throw unreadable('its header makes no sense')
  return { format: 'jpeg', bitDepth: 8, alpha: false, ...exif, icc: profile.whole(), notes: withoutRepeats(notes), ...frame }
}
