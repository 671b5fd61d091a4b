/** Device value 0…1 → linear light 0…1. */
export type ToneCurve = (device: number) => number

export const s15Fixed16 = (b: Buffer, at: number) => b.readInt32BE(at) / 65536

/** ICC.1:2022 10.18 parametricCurveType: exponent and coefficients by function type. */
function parametricCurve(tag: Buffer): ToneCurve {
  const type = tag.readUInt16BE(8)
  const count = [1, 3, 4, 5, 7][type]
  if (count === undefined) throw new RangeError('unknown parametric curve')
  const [g = 1, a = 1, b = 0, c = 0, d = 0, e = 0, f = 0] = Array.from({ length: count }, (_, i) => s15Fixed16(tag, 12 + 4 * i))
  const power = (x: number) => Math.max(0, a * x + b) ** g
  switch (type) {
    case 0: return x => x ** g
    case 1: return x => x >= -b / a ? power(x) : 0
    case 2: return x => x >= -b / a ? power(x) + c : c
    case 3: return x => x >= d ? power(x) : c * x
    default: return x => x >= d ? power(x) + e : c * x + f
  }
}

/** ICC.1:2022 10.6 curveType: identity, one exponent, or a table read by linear interpolation. */
function sampledCurve(tag: Buffer): ToneCurve {
  const count = tag.readUInt32BE(8)
  if (count === 0) return x => x
  if (count === 1) {
    const gamma = tag.readUInt16BE(12) / 256
    return x => x ** gamma
  }
  const table = Float64Array.from({ length: count }, (_, i) => tag.readUInt16BE(12 + 2 * i) / 65535)
  return (x) => {
    const place = x * (count - 1)
    const i = Math.min(Math.floor(place), count - 2)
    return table[i]! + (place - i) * (table[i + 1]! - table[i]!)
  }
}

export function readCurve(tag: Buffer): ToneCurve {
  const type = tag.toString('latin1', 0, 4)
  if (type === 'para') return parametricCurve(tag)
  if (type === 'curv') return sampledCurve(tag)
  throw new RangeError('unknown curve type')
}
