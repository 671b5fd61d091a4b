import { promisify } from 'node:util'
import { inflate } from 'node:zlib'
import { type ExifFacts, readExif } from './exif'
import type { FileWindow } from './file-window'
import { type CodePoints, metadataMaxBytes, type PictureHeader, profileMaxBytes, unreadable } from './header'

const inflateAll = promisify(inflate)

/** PNG (ISO/IEC 15948) 11.2.2: which bit depths each colour type may have. */
const depthsOf: Record<number, number[]> = { 0: [1, 2, 4, 8, 16], 2: [8, 16], 3: [1, 2, 4, 8], 4: [8, 16], 6: [8, 16] }

function readImageHeader(chunk: Buffer): Omit<PictureHeader, 'icc' | keyof ExifFacts> {
  if (chunk.length < 25) throw unreadable('it is cut off')
  const width = chunk.readUInt32BE(8), height = chunk.readUInt32BE(12), depth = chunk[16]!, colourType = chunk[17]!
  const sound = chunk.toString('latin1', 4, 8) === 'IHDR' && width > 0 && height > 0 && depthsOf[colourType]?.includes(depth)
  if (!sound) throw unreadable('its header makes no sense')
  return {
    format: 'png', width, height, bitDepth: depth === 16 ? 16 : 8,
    colour: colourType === 0 || colourType === 4 ? 'grey' : 'rgb', alpha: colourType >= 4, progressive: chunk[20] === 1,
  }
}

/** An iCCP chunk's profile (11.3.2.3): name, zero, method, deflated bytes. A broken one counts as none. */
async function readProfile(body: Buffer): Promise<Buffer | null> {
  const nameEnd = body.indexOf(0)
  if (nameEnd < 0 || body.length < nameEnd + 3) return null
  return inflateAll(body.subarray(nameEnd + 2), { maxOutputLength: profileMaxBytes }).catch(() => null)
}

/** gAMA (11.3.2.2), in hundred-thousandths. What sRGB's writers put there (11.3.2.5) means sRGB, and what no screen has means nothing. */
const exponentOf = (gamma: number): number | undefined => Math.abs(gamma - 45455) < 500 || gamma < 10_000 || gamma > 300_000 ? undefined : 100_000 / gamma

/** Walks the chunks up to the picture's data; long ones are stepped over, never loaded. */
export async function readPngHeader(window: FileWindow): Promise<PictureHeader> {
  const image = readImageHeader(await window.bytes(8, 25))
  let icc: Buffer | null = null
  let exif: ExifFacts = { orientation: 1, device: null }
  let alpha = image.alpha
  let codePoints: CodePoints | undefined
  let exponent: number | undefined, isSrgb = false
  const notes: PictureHeader['notes'] = []
  for (let offset = 33; ;) {
    const head = await window.bytes(offset, 8)
    if (head.length < 8) throw unreadable('it is cut off')
    const length = head.readUInt32BE(0), type = head.toString('latin1', 4, 8)
    if (type === 'IDAT') return { ...image, alpha, icc, ...exif, ...codePoints ? { codePoints } : {}, ...exponent && !isSrgb ? { exponent } : {}, notes }
    if (type === 'IEND' || !/^[A-Za-z]{4}$/.test(type)) throw unreadable('there is no picture in it')
    if (type === 'tRNS') alpha = true
    if (type === 'sRGB') isSrgb = true
    if (type === 'gAMA' && length === 4) exponent = exponentOf((await window.bytes(offset + 8, 4)).readUInt32BE(0))
    if (type === 'acTL') notes.push('animation')
    // PNG, third edition, 11.3.2.6: code points, before a profile.
    if (type === 'cICP' && length === 4) {
      const [primaries, transfer] = (await window.bytes(offset + 8, 2))
      codePoints = { primaries: primaries!, transfer: transfer! }
    }
    if (type === 'iCCP' && length <= profileMaxBytes) icc = await readProfile(await window.bytes(offset + 8, length))
    if (type === 'eXIf' && length <= 65_536) exif = readExif(await window.bytes(offset + 8, length))
    offset += 12 + length
    if (offset > metadataMaxBytes) throw unreadable('there is too much beside the picture in it')
  }
}
