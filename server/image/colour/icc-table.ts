import { luminanceFromLightness } from '#shared/tone/lightness'
import { readCurve, s15Fixed16, type ToneCurve } from './icc-curve'

/** Writes D50 XYZ of the device values 0 … 1 in `device` to `xyz`. Nothing is clipped to a gamut. */
export type TableModel = (device: Float64Array, xyz: Float64Array) => void

/** Colours measured on a grid over the device's channels. */
interface Grid { points: number[], outputs: number, values: Float64Array }

/** What a table's numbers 0 … 1 mean: the connection space's encoding (ICC.1:2022, 6.3.4). */
type Encoding = 'lab' | 'lab-16-bit-of-version-2' | 'xyz'

/** A profile's A2B0 (perceptual) of three or four channels: lut8Type (ICC.1:2022, 10.11), lut16Type (10.10) or lutAToBType (10.12). Throws RangeError. */
export function readTable(tag: Buffer, connection: string, channels: number): TableModel {
  const type = tag.toString('latin1', 0, 4)
  if (tag[8] !== channels || tag[9] !== 3) throw new RangeError('a table of other channels')
  if (type === 'mAB ') return readModern(tag, connection === 'XYZ ' ? 'xyz' : 'lab')
  if (type !== 'mft1' && type !== 'mft2') throw new RangeError('unknown kind of table')
  return readOld(tag, channels, type === 'mft1' ? 1 : 2, connection === 'XYZ ' ? 'xyz' : type === 'mft1' ? 'lab' : 'lab-16-bit-of-version-2')
}

function readOld(tag: Buffer, channels: number, size: 1 | 2, encoding: Encoding): TableModel {
  const side = tag[10]!
  let at = size === 1 ? 48 : 52
  const [ins, outs] = size === 1 ? [256, 256] : [tag.readUInt16BE(48), tag.readUInt16BE(50)]
  const numbers = (count: number) => {
    const read = samples(tag, at, count, size)
    at += count * size
    return read
  }
  const inputs = Array.from({ length: channels }, () => tableCurve(numbers(ins)))
  const points = Array.from<number>({ length: channels }).fill(side)
  const grid = { points, outputs: 3, values: numbers(3 * side ** channels) }
  const outputs = Array.from({ length: 3 }, () => tableCurve(numbers(outs)))
  return modelOf(encoding, inputs, grid, outputs)
}

function readModern(tag: Buffer, encoding: Encoding): TableModel {
  const channels = tag[8]!
  const [b, matrixAt, m, gridAt, a] = [12, 16, 20, 24, 28].map(at => tag.readUInt32BE(at)) as [number, number, number, number, number]
  const after = curvesAt(tag, b, 3)
  if (gridAt === 0 || a === 0) throw new RangeError('a table without a grid')
  const points = [...tag.subarray(gridAt, gridAt + channels)]
  const size = tag[gridAt + 16]!
  if (size !== 1 && size !== 2) throw new RangeError('unknown precision')
  const grid = { points, outputs: 3, values: samples(tag, gridAt + 20, 3 * points.reduce((product, side) => product * side, 1), size) }
  if (m === 0 || matrixAt === 0) return modelOf(encoding, curvesAt(tag, a, channels), grid, after)
  const middle = curvesAt(tag, m, 3), matrix = Array.from({ length: 12 }, (_, i) => s15Fixed16(tag, matrixAt + 4 * i))
  return modelOf(encoding, curvesAt(tag, a, channels), grid, after, (v) => {
    const [x, y, z] = middle.map((curve, i) => curve(v[i]!)) as [number, number, number]
    for (let i = 0; i < 3; i++) v[i] = matrix[3 * i]! * x + matrix[3 * i + 1]! * y + matrix[3 * i + 2]! * z + matrix[9 + i]!
  })
}

function samples(tag: Buffer, at: number, count: number, size: 1 | 2): Float64Array {
  if (count < 1 || at + count * size > tag.length) throw new RangeError('a table that is cut off')
  return Float64Array.from({ length: count }, (_, i) => size === 1 ? tag[at + i]! / 255 : tag.readUInt16BE(at + 2 * i) / 65535)
}

const unit = (x: number) => x > 0 ? x < 1 ? x : 1 : 0

function tableCurve(table: Float64Array): ToneCurve {
  const last = table.length - 1
  return (x) => {
    const place = unit(x) * last, i = Math.min(Math.floor(place), Math.max(0, last - 1))
    return last === 0 ? table[0]! : table[i]! + (place - i) * (table[i + 1]! - table[i]!)
  }
}

/** Curves one after the other, each padded to four bytes. */
function curvesAt(tag: Buffer, start: number, count: number): ToneCurve[] {
  let at = start
  return Array.from({ length: count }, () => {
    const here = tag.subarray(at)
    const curve = readCurve(here)
    const bytes = here.toString('latin1', 0, 4) === 'curv' ? 12 + 2 * here.readUInt32BE(8) : 12 + 4 * [1, 3, 4, 5, 7][here.readUInt16BE(8)]!
    at += Math.ceil(bytes / 4) * 4
    return curve
  })
}

function modelOf(encoding: Encoding, inputs: ToneCurve[], grid: Grid, outputs: ToneCurve[], between?: (v: Float64Array) => void): TableModel {
  if (grid.points.some(side => side < 2)) throw new RangeError('a grid of one point')
  const decode = decoders[encoding]
  const place = new Float64Array(inputs.length)
  return (device, xyz) => {
    for (let i = 0; i < place.length; i++) place[i] = unit(inputs[i]!(device[i]!))
    interpolate(grid, place, xyz)
    between?.(xyz)
    for (let i = 0; i < 3; i++) xyz[i] = outputs[i]!(unit(xyz[i]!))
    decode(xyz)
  }
}

/** Multilinear: the 2ⁿ corners of the cell around the place, each by its share. */
function interpolate({ points, values }: Grid, place: Float64Array, out: Float64Array): void {
  const n = points.length
  let base = 0, x = 0, y = 0, z = 0
  const steps = corner, shares = share
  // The last channel varies fastest.
  for (let i = n - 1, stride = 3; i >= 0; stride *= points[i]!, i--) {
    const at = place[i]! * (points[i]! - 1), cell = Math.min(Math.floor(at), points[i]! - 2)
    base += cell * stride
    steps[i] = stride
    shares[i] = at - cell
  }
  for (let which = 0; which < 1 << n; which++) {
    let weight = 1, from = base
    for (let i = 0; i < n; i++) {
      if (which >> i & 1) {
        weight *= shares[i]!
        from += steps[i]!
      }
      else weight *= 1 - shares[i]!
    }
    if (weight === 0) continue
    x += weight * values[from]!
    y += weight * values[from + 1]!
    z += weight * values[from + 2]!
  }
  out[0] = x
  out[1] = y
  out[2] = z
}
const corner = new Float64Array(4), share = new Float64Array(4)

const white = [0.9642, 1, 0.8249] as const
/** XYZ from f(t) of CIE 15:2004, 8.2.1.1, which is L* of the same value in other units. */
const fromRoot = (f: number) => luminanceFromLightness(Math.max(0, 116 * f - 16))

function labToXyz(v: Float64Array, lightness: number, a: number, b: number): void {
  const middle = (lightness + 16) / 116
  v[0] = white[0] * fromRoot(middle + a / 500)
  v[1] = fromRoot(middle)
  v[2] = white[2] * fromRoot(middle - b / 200)
}

const decoders: Record<Encoding, (v: Float64Array) => void> = {
  'lab': v => labToXyz(v, 100 * v[0]!, 255 * v[1]! - 128, 255 * v[2]! - 128),
  // L* 100 is FF00 there, and a* 0 is 8000 (ICC.1:2022, 10.10, table 42).
  'lab-16-bit-of-version-2': v => labToXyz(v, 100 * v[0]! * 65535 / 65280, v[1]! * 65535 / 256 - 128, v[2]! * 65535 / 256 - 128),
  // u1Fixed15: 1.0 is 8000.
  'xyz': (v) => { for (let i = 0; i < 3; i++) v[i] = v[i]! * 65535 / 32768 },
}
