import type { FilmChannels, FilmRows } from './compose'
import { deflatedBands, type RowCoder, rowsPerBand } from './bands'
import type { FilmFile } from './film-file'

export interface RasterSpec { width: number, height: number, channels: FilmChannels, pixelsPerInch: number }

/** Horizontal differencing of 16-bit samples, little-endian (TIFF 6.0, section 14). */
function tiffRows({ width, channels }: RasterSpec): RowCoder {
  const samples = width * channels
  return {
    bytesPerRow: 2 * samples,
    encode(row, to, at) {
      const differences = new Uint16Array(to.buffer, to.byteOffset + at, samples)
      for (let c = 0; c < channels; c++) differences[c] = row[c]!
      for (let i = channels; i < samples; i++) differences[i] = row[i]! - row[i - channels]!
    },
  }
}

const short = 3, long = 4, rational = 5
type Field = [tag: number, type: number, values: number[]]

/** The file's directory at `position`; values that don't fit into their field follow it. */
function directory(fields: Field[], position: number): Buffer {
  const head = Buffer.alloc(2 + 12 * fields.length + 4)
  const further: Buffer[] = []
  let end = position + head.length
  head.writeUInt16LE(fields.length, 0)
  fields.forEach(([tag, type, values], i) => {
    const at = 2 + 12 * i
    head.writeUInt16LE(tag, at)
    head.writeUInt16LE(type, at + 2)
    head.writeUInt32LE(type === rational ? values.length / 2 : values.length, at + 4)
    const item = type === short ? 2 : 4
    const bytes = Buffer.alloc(Math.max(4, values.length * item))
    values.forEach((value, k) => bytes.writeUIntLE(value, k * item, item))
    if (bytes.length === 4) bytes.copy(head, at + 8)
    else {
      head.writeUInt32LE(end, at + 8)
      further.push(bytes)
      end += bytes.length
    }
  })
  return Buffer.concat([head, ...further])
}

/** TIFF 6.0: 16 bit, deflated strips (Adobe's compression 8), resolution in inches, no profile: the numbers are ink. */
export async function writeTiff(file: FilmFile, rows: FilmRows, spec: RasterSpec, onRows: (done: number) => void): Promise<void> {
  const coder = tiffRows(spec)
  const offsets: number[] = [], sizes: number[] = []
  file.write(Buffer.from('II*\0\0\0\0\0', 'latin1'))
  let done = 0
  for await (const band of deflatedBands(rows, spec.height, coder, 'streams')) {
    offsets.push(file.position)
    sizes.push(band.deflated.length)
    file.write(band.deflated)
    onRows(done += band.rows)
  }
  if (file.position % 2 === 1) file.write(Buffer.alloc(1))
  const each = (value: number) => Array.from({ length: spec.channels }, () => value)
  const start = Buffer.alloc(4)
  start.writeUInt32LE(file.position)
  file.write(directory([
    [256, long, [spec.width]], [257, long, [spec.height]], [258, short, each(16)],
    [259, short, [8]], // deflate
    [262, short, [spec.channels === 1 ? 1 : 2]], // black is zero, or RGB
    [273, long, offsets], [277, short, [spec.channels]], [278, long, [rowsPerBand(coder.bytesPerRow)]], [279, long, sizes],
    [282, rational, [spec.pixelsPerInch, 1]], [283, rational, [spec.pixelsPerInch, 1]],
    [284, short, [1]], [296, short, [2]], // interleaved; inch
    [317, short, [2]], [339, short, each(1)], // horizontal differencing; unsigned
  ], file.position))
  file.patch(start, 4)
}
