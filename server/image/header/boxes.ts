import type { FileWindow } from './file-window'
import { unreadable } from './header'

/** A box of the ISO base media file format (ISO/IEC 14496-12, 4.2). */
export interface Box { type: string, body: Buffer }

const metaMaxBytes = 16_000_000
const mostBoxes = 10_000

/** The body of the file's top-level meta box, without its version and flags. */
export async function findMeta(window: FileWindow): Promise<Buffer> {
  for (let offset = 0, box = 0; offset < window.size && box < mostBoxes; box++) {
    const head = await window.bytes(offset, 16)
    if (head.length < 8) break
    const short = head.readUInt32BE(0)
    const bytes = short === 1 && head.length === 16 ? Number(head.readBigUInt64BE(8)) : short === 0 ? window.size - offset : short
    const headBytes = short === 1 ? 16 : 8
    if (bytes < headBytes) break
    if (head.toString('latin1', 4, 8) === 'meta') {
      if (bytes > metaMaxBytes) throw unreadable('there is too much beside the picture in it')
      return Buffer.from(await window.bytes(offset + headBytes, bytes - headBytes)).subarray(4)
    }
    offset += bytes
  }
  throw unreadable('there is no picture in it')
}

/** Boxes that stand one after the other; ends at the first that makes no sense. */
export function boxesOf(bytes: Buffer): Box[] {
  const boxes: Box[] = []
  for (let at = 0; at + 8 <= bytes.length && boxes.length < mostBoxes;) {
    const size = bytes.readUInt32BE(at) || bytes.length - at
    if (size < 8 || at + size > bytes.length) break
    boxes.push({ type: bytes.toString('latin1', at + 4, at + 8), body: bytes.subarray(at + 8, at + size) })
    at += size
  }
  return boxes
}

export function bodyOf(boxes: Box[], type: string): Buffer {
  const box = boxes.find(box => box.type === type)
  if (!box) throw unreadable('its header makes no sense')
  return box.body
}
