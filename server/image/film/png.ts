import { crc32 } from 'node:zlib'
import { deflatedBands, joinChecksums, type RowCoder, streamHead, streamTail } from './bands'
import type { FilmRows } from './compose'
import type { FilmFile } from './film-file'
import { subtractLeft } from './filter-rows'
import type { RasterSpec } from './tiff'

/** Big-endian samples, filtered. */
function pngRows({ width, channels }: RasterSpec): RowCoder {
  const bytes = new Uint8Array(2 * width * channels)
  return {
    bytesPerRow: 1 + bytes.length,
    encode(row, to, at) {
      for (let i = 0, k = 0; i < row.length; i++, k += 2) {
        bytes[k] = row[i]! >> 8
        bytes[k + 1] = row[i]!
      }
      subtractLeft(bytes, 2 * channels, to, at)
    },
  }
}

function chunk(type: string, ...parts: Buffer[]): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), ...parts])
  const framed = Buffer.alloc(body.length + 8)
  framed.writeUInt32BE(body.length - 4)
  body.copy(framed, 4)
  framed.writeUInt32BE(crc32(body), body.length + 4)
  return framed
}

function imageHeader({ width, height, channels }: RasterSpec): Buffer {
  const header = Buffer.alloc(13)
  header.writeUInt32BE(width, 0)
  header.writeUInt32BE(height, 4)
  header[8] = 16
  header[9] = channels === 1 ? 0 : 2
  return header
}

function pixelSize(pixelsPerInch: number): Buffer {
  const perMetre = Math.round(pixelsPerInch / 0.0254)
  const body = Buffer.alloc(9)
  body.writeUInt32BE(perMetre, 0)
  body.writeUInt32BE(perMetre, 4)
  body[8] = 1
  return body
}

/** PNG (ISO/IEC 15948): 16 bit, pHYs, neither profile nor gamma: the numbers are ink. */
export async function writePng(file: FilmFile, rows: FilmRows, spec: RasterSpec, onRows: (done: number) => void): Promise<void> {
  file.write(Buffer.from('\x89PNG\r\n\x1A\n', 'latin1'))
  file.write(chunk('IHDR', imageHeader(spec)))
  file.write(chunk('pHYs', pixelSize(spec.pixelsPerInch)))
  let checksum = 1, done = 0
  for await (const band of deflatedBands(rows, spec.height, pngRows(spec), 'parts')) {
    file.write(chunk('IDAT', ...(done === 0 ? [streamHead] : []), band.deflated))
    checksum = joinChecksums(checksum, band.checksum, band.bytes)
    onRows(done += band.rows)
  }
  file.write(chunk('IDAT', streamTail(checksum)))
  file.write(chunk('IEND'))
}
