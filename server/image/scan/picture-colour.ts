import { grey8, type PictureColour } from '#shared/calibration/reading/picture'
import { type Matrix3, multiply } from '#shared/tone/matrix'
import { codeFromLinear, linearTable, xyzFromWorking } from '#shared/tone/working-space'
import type { ToneCurve } from '../colour/icc-curve'
import type { WorkingLight } from '../colour/working-light'

/** Curves that differ by less than this everywhere are one curve. */
const sameCurve = 1e-4

type Codes = Uint8Array | Uint8ClampedArray | Uint16Array

/**
 * What a picture's codes mean, as reading wants it: one curve for all channels. Where a profile has a curve for each, the codes
 * are written anew as L*-coded 16 bits.
 */
export function pictureColour(codes: Codes, channels: 1 | 3 | 4, { curves, matrix }: WorkingLight): { codes: Codes, colour: PictureColour } {
  const greatest = codes instanceof Uint16Array ? 65535 : 255
  if (channels === 1) return { codes, colour: { linear: tableOf(curves[0]!, greatest), xyz: grey8.xyz } }
  const xyz = multiply(xyzFromWorking, matrix as Matrix3)
  if (curves.every(curve => areAlike(curve, curves[0]!))) return { codes, colour: { linear: tableOf(curves[0]!, greatest), xyz } }
  return { codes: recoded(codes, channels, curves, greatest), colour: { linear: linearTable(), xyz } }
}

const tableOf = (curve: ToneCurve, greatest: number): Float32Array => Float32Array.from({ length: greatest + 1 }, (_, code) => curve(code / greatest))

const areAlike = (a: ToneCurve, b: ToneCurve): boolean => Array.from({ length: 65 }, (_, i) => i / 64).every(x => Math.abs(a(x) - b(x)) < sameCurve)

function recoded(codes: Codes, channels: 3 | 4, curves: ToneCurve[], greatest: number): Uint16Array {
  const tables = curves.map(curve => Uint16Array.from({ length: greatest + 1 }, (_, code) => Math.round(codeFromLinear(Math.min(1, Math.max(0, curve(code / greatest)))))))
  const out = new Uint16Array(codes.length)
  for (let at = 0; at < codes.length; at += channels) {
    for (let c = 0; c < 3; c++) out[at + c] = tables[c]![codes[at + c]!]!
  }
  return out
}
