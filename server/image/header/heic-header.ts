import type { FileWindow } from './file-window'
import { type PictureHeader, profileMaxBytes, unreadable } from './header'

// ISO/IEC 14496-12 (boxes) and ISO/IEC 23008-12 (HEIF): ftyp, then meta with pitm, iprp/ipco and iprp/ipma.
const metaMaxBytes = 16_000_000
const brands = new Set(['heic', 'heix', 'hevc', 'hevx', 'heim', 'heis', 'mif1', 'msf1'])

interface Box { type: string, body: Buffer }

/** True for a HEIF file whose pictures are coded as HEVC. */
export function isHeic(start: Buffer): boolean {
  if (start.length < 16 || start.toString('latin1', 4, 8) !== 'ftyp') return false
  const end = Math.min(start.length, start.readUInt32BE(0))
  const named = Array.from({ length: Math.max(0, Math.floor((end - 8) / 4)) }, (_, i) => start.toString('latin1', 8 + 4 * i, 12 + 4 * i))
  return named.some(brand => brands.has(brand)) && !named.includes('avif')
}

/** Sides and profile of the primary picture, from its properties. Only phones and cameras write HEIC. */
export async function readHeicHeader(window: FileWindow): Promise<PictureHeader> {
  const meta = boxesOf((await findMeta(window)).subarray(4))
  const properties = primaryProperties(meta)
  const sides = properties.filter(({ type, body }) => type === 'ispe' && body.length >= 12).map(({ body }) => [body.readUInt32BE(4), body.readUInt32BE(8)] as const)
  const [width, height] = sides[0] ?? [0, 0]
  if (width === 0 || height === 0) throw unreadable('its header makes no sense')
  return { format: 'heic', width, height, orientation: 1, bitDepth: 8, colour: 'rgb', alpha: false, progressive: true, device: 'camera', icc: profileOf(properties) }
}

async function findMeta(window: FileWindow): Promise<Buffer> {
  for (let offset = 0; offset < window.size;) {
    const head = await window.bytes(offset, 16)
    if (head.length < 8) break
    const short = head.readUInt32BE(0)
    const bytes = short === 1 && head.length === 16 ? Number(head.readBigUInt64BE(8)) : short === 0 ? window.size - offset : short
    const headBytes = short === 1 ? 16 : 8
    if (bytes < headBytes) break
    if (head.toString('latin1', 4, 8) === 'meta') {
      if (bytes > metaMaxBytes) throw unreadable('there is too much beside the picture in it')
      return Buffer.from(await window.bytes(offset + headBytes, bytes - headBytes))
    }
    offset += bytes
  }
  throw unreadable('there is no picture in it')
}

function boxesOf(bytes: Buffer): Box[] {
  const boxes: Box[] = []
  for (let at = 0; at + 8 <= bytes.length;) {
    const size = bytes.readUInt32BE(at) || bytes.length - at
    if (size < 8 || at + size > bytes.length) break
    boxes.push({ type: bytes.toString('latin1', at + 4, at + 8), body: bytes.subarray(at + 8, at + size) })
    at += size
  }
  return boxes
}

const bodyOf = (boxes: Box[], type: string): Buffer => {
  const box = boxes.find(box => box.type === type)
  if (!box) throw unreadable('its header makes no sense')
  return box.body
}

function primaryProperties(meta: Box[]): Box[] {
  const pitm = bodyOf(meta, 'pitm')
  const iprp = boxesOf(bodyOf(meta, 'iprp'))
  const all = boxesOf(bodyOf(iprp, 'ipco'))
  try {
    const primary = pitm[0] === 0 ? pitm.readUInt16BE(4) : pitm.readUInt32BE(4)
    return propertiesOf(bodyOf(iprp, 'ipma'), primary).flatMap(index => all[index - 1] ?? [])
  }
  catch (error) {
    if (error instanceof RangeError) throw unreadable('its header is cut off')
    throw error
  }
}

/** Indices from 1 of an item's properties in ipma (HEIF 9.3.1): longer ids from version 1, longer indices with flag 1. */
function propertiesOf(ipma: Buffer, item: number): number[] {
  const [longIds, longIndices] = [ipma[0]! >= 1, (ipma[3]! & 1) === 1]
  let at = 8
  for (let entry = 0, entries = ipma.readUInt32BE(4); entry < entries; entry++) {
    const id = longIds ? ipma.readUInt32BE(at) : ipma.readUInt16BE(at)
    at += longIds ? 4 : 2
    const count = ipma.readUInt8(at++)
    const indices = Array.from({ length: count }, (_, i) => longIndices ? ipma.readUInt16BE(at + 2 * i) & 0x7fff : ipma.readUInt8(at + i) & 0x7f)
    if (id === item) return indices
    at += count * (longIndices ? 2 : 1)
  }
  return []
}

/** The embedded ICC profile (colr of type prof or rICC); colours given by numbers only count as sRGB. */
function profileOf(properties: Box[]): Buffer | null {
  const colr = properties.find(({ type, body }) => type === 'colr' && ['prof', 'rICC'].includes(body.toString('latin1', 0, 4)))
  return colr && colr.body.length <= profileMaxBytes ? Buffer.from(colr.body.subarray(4)) : null
}
