import { adaptation, d50, type Primaries, xyzMatrix } from '#shared/tone/colour-spaces'
import { multiply, type Vector3 } from '#shared/tone/matrix'
import { srgbToLinear } from '#shared/tone/srgb'
import { workingFromXyz } from '#shared/tone/working-space'
import { type CodePoints, unreadable } from '../header/header'
import type { ToneCurve } from './icc-curve'
import type { WorkingLight } from './working-light'

const whiteAt = (x: number, y: number): Vector3 => [x / y, 1, (1 - x - y) / y]
const d65 = whiteAt(0.3127, 0.329)

interface Space { name: string, primaries: Primaries, white: Vector3 }
const srgb: Space = { name: 'sRGB', primaries: [[0.64, 0.33], [0.3, 0.6], [0.15, 0.06]], white: d65 }

/** ITU-T H.273, table 2. What is unspecified (2) or rare counts as sRGB. */
const spaces: Record<number, Space> = {
  1: srgb,
  5: { name: 'Rec. 601 (625 lines)', primaries: [[0.64, 0.33], [0.29, 0.6], [0.15, 0.06]], white: d65 },
  6: { name: 'Rec. 601 (525 lines)', primaries: [[0.63, 0.34], [0.31, 0.595], [0.155, 0.07]], white: d65 },
  9: { name: 'Rec. 2020', primaries: [[0.708, 0.292], [0.17, 0.797], [0.131, 0.046]], white: d65 },
  11: { name: 'DCI P3', primaries: [[0.68, 0.32], [0.265, 0.69], [0.15, 0.06]], white: whiteAt(0.314, 0.351) },
  12: { name: 'Display P3', primaries: [[0.68, 0.32], [0.265, 0.69], [0.15, 0.06]], white: d65 },
}
const spaceOf = ({ primaries }: CodePoints): Space => spaces[primaries] ?? srgb

/**
 * H.273, table 3. The camera curves of television (1, 6, 14, 15) are read like sRGB's, as displays show both (common practice, no source).
 * Perceptual quantizer and hybrid log-gamma hold more light than paper white and are not guessed at.
 */
function curveOf({ transfer }: CodePoints): ToneCurve {
  if (transfer === 16 || transfer === 18) throw unreadable('its tones are stored for HDR screens (PQ or HLG). Export it for standard range')
  if (transfer === 4) return x => x ** 2.2
  if (transfer === 5) return x => x ** 2.8
  return transfer === 8 ? x => x : srgbToLinear
}

export const nameOfCodePoints = (codePoints: CodePoints): string => spaceOf(codePoints).name

export function lightOfCodePoints(codePoints: CodePoints, colour: 'grey' | 'rgb'): WorkingLight {
  const { primaries, white } = spaceOf(codePoints)
  const curve = curveOf(codePoints)
  if (colour === 'grey') return { curves: [curve], matrix: [[1], [1], [1]] }
  return { curves: [curve, curve, curve], matrix: multiply(workingFromXyz, multiply(adaptation(white, d50), xyzMatrix(primaries, white))) }
}
