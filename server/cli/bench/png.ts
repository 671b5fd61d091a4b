import { crc32, deflateSync } from 'node:zlib'

export interface Pixels { width: number, height: number, channels: 1 | 3, /** 8 bit, row by row */ codes: Uint8Array }

/** A PNG (ISO/IEC 15948), 8 bit, no filter; `level` 0 stores the bytes as they are. */
export function pngOf({ width, height, channels, codes }: Pixels, level = 1): Buffer {
  const rowBytes = width * channels
  const rows = Buffer.alloc(height * (rowBytes + 1))
  for (let y = 0; y < height; y++) rows.set(codes.subarray(y * rowBytes, (y + 1) * rowBytes), y * (rowBytes + 1) + 1)
  const header = Buffer.alloc(13)
  header.writeUInt32BE(width, 0)
  header.writeUInt32BE(height, 4)
  header[8] = 8
  header[9] = channels === 3 ? 2 : 0
  return Buffer.concat([Buffer.from('\x89PNG\r\n\x1a\n', 'latin1'), chunk('IHDR', header), chunk('IDAT', deflateSync(rows, { level })), chunk('IEND', Buffer.alloc(0))])
}

function chunk(type: string, content: Buffer): Buffer {
  const named = Buffer.concat([Buffer.from(type, 'latin1'), content])
  const [length, check] = [Buffer.alloc(4), Buffer.alloc(4)]
  length.writeUInt32BE(content.length)
  check.writeUInt32BE(crc32(named))
  return Buffer.concat([length, named, check])
}
