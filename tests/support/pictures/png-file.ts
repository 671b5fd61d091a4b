import { crc32, deflateSync } from 'node:zlib'

export interface PngPicture {
  width: number
  height: number
  bitDepth: 8 | 16
  /** samples a pixel: grey, grey and alpha, RGB, RGBA */
  channels: 1 | 2 | 3 | 4
  /** row by row, interleaved */
  samples: ArrayLike<number>
  icc?: Buffer
  orientation?: number
}

export function pngChunk(type: string, body: Buffer = Buffer.alloc(0)): Buffer {
  const chunk = Buffer.alloc(12 + body.length)
  chunk.writeUInt32BE(body.length, 0)
  chunk.write(type, 4, 'latin1')
  body.copy(chunk, 8)
  chunk.writeUInt32BE(crc32(chunk.subarray(4, 8 + body.length)), 8 + body.length)
  return chunk
}

export const pngSignature = Buffer.from('\x89PNG\r\n\x1A\n', 'latin1')

export function pngHeader(width: number, height: number, bitDepth: number, colourType: number): Buffer {
  const body = Buffer.alloc(13)
  body.writeUInt32BE(width, 0)
  body.writeUInt32BE(height, 4)
  body[8] = bitDepth
  body[9] = colourType
  return pngChunk('IHDR', body)
}

/** An Exif block with the orientation tag alone. */
export function exifOrientation(orientation: number, order: 'II' | 'MM' = 'MM'): Buffer {
  const exif = Buffer.alloc(26)
  exif.write(order, 'latin1')
  const u16 = (value: number, at: number) => order === 'II' ? exif.writeUInt16LE(value, at) : exif.writeUInt16BE(value, at)
  const u32 = (value: number, at: number) => order === 'II' ? exif.writeUInt32LE(value, at) : exif.writeUInt32BE(value, at)
  u16(42, 2)
  u32(8, 4)
  u16(1, 8)
  u16(274, 10)
  u16(3, 12)
  u32(1, 14)
  u16(orientation, 18)
  return exif
}

/** A PNG file written without the engine or its library, unfiltered. */
export function pngFile({ width, height, bitDepth, channels, samples, icc, orientation }: PngPicture): Buffer {
  const bytesPerSample = bitDepth / 8
  const line = 1 + width * channels * bytesPerSample
  const raw = Buffer.alloc(line * height)
  for (let y = 0; y < height; y++) {
    for (let i = 0; i < width * channels; i++) {
      const value = samples[y * width * channels + i]!
      if (bitDepth === 16) raw.writeUInt16BE(value, y * line + 1 + 2 * i)
      else raw[y * line + 1 + i] = value
    }
  }
  return Buffer.concat([
    pngSignature, pngHeader(width, height, bitDepth, [0, 0, 4, 2, 6][channels]!),
    ...(icc ? [pngChunk('iCCP', Buffer.concat([Buffer.from('profile\0\0', 'latin1'), deflateSync(icc)]))] : []),
    ...(orientation ? [pngChunk('eXIf', exifOrientation(orientation))] : []),
    pngChunk('IDAT', deflateSync(raw)), pngChunk('IEND'),
  ])
}
