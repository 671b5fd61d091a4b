import { greatestCode, codeFromLinear } from '#shared/tone/working-space'

/**
 * The table is read at the square root of the light, where L* is nearly straight: with linear interpolation it errs by
 * less than 0.001 code before rounding.
 */
const steps = 8192
let codeByRoot: Float64Array | undefined
const rootTable = () => codeByRoot ??= Float64Array.from({ length: steps + 2 }, (_, i) => codeFromLinear(Math.min(1, (i / steps) ** 2)))

/** L*-coded 16-bit codes, round(65535 · L* / 100), of linear light that is clipped to 0…1 here. */
export function encodeTones(light: Float32Array, codes: Uint16Array, count = light.length, at = 0): void {
  const table = rootTable()
  for (let i = 0; i < count; i++) {
    const value = light[i]!
    if (value >= 1) { codes[at + i] = greatestCode; continue }
    const place = value > 0 ? Math.sqrt(value) * steps : 0
    const below = place | 0
    const low = table[below]!
    codes[at + i] = low + (table[below + 1]! - low) * (place - below) + 0.5
  }
}
