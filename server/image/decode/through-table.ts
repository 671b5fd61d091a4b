import { transform, type Vector3 } from '#shared/tone/matrix'
import { greatestCode, workingFromXyz } from '#shared/tone/working-space'
import { lightnessFromLuminance } from '#shared/tone/lightness'
import type { TableModel } from '../colour/icc-table'
import { type Codes, greatestOf } from './codes'

/** Codes of a device that a profile describes by a table → L*-coded channels of the working space, with transparency kept as it is. */
export function throughTable({ width, height, channels, codes }: Codes, model: TableModel, colours: 3 | 4): Codes {
  const greatest = greatestOf(codes)
  const alpha = channels > colours ? 1 : 0
  const out = new Uint16Array(width * height * (3 + alpha))
  const device = new Float64Array(colours), xyz = new Float64Array(3)
  for (let from = 0, to = 0; from < codes.length; from += channels, to += 3 + alpha) {
    if (from > 0 && sameColour(codes, from, from - channels, colours)) out.copyWithin(to, to - 3 - alpha, to - alpha)
    else {
      for (let i = 0; i < colours; i++) device[i] = codes[from + i]! / greatest
      model(device, xyz)
      transform(workingFromXyz, xyz as unknown as Vector3).forEach((linear, i) => { out[to + i] = codeOf(linear) })
    }
    if (alpha) out[to + 3] = Math.round(codes[from + colours]! * 65535 / greatest)
  }
  return { width, height, channels: 3 + alpha, codes: out }
}

function sameColour(codes: Codes['codes'], a: number, b: number, count: number): boolean {
  for (let i = 0; i < count; i++) if (codes[a + i] !== codes[b + i]) return false
  return true
}

/** The working space holds all colours of surfaces; what lies outside is a table's noise. */
const codeOf = (linear: number): number => Math.round(greatestCode * lightnessFromLuminance(Math.min(1, Math.max(0, linear))) / 100)
