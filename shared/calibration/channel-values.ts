import type { ReadingChannel } from '../schemas/benches'
import { ComputeError } from '../errors'
import { srgbFromXyz } from '../tone/colour-spaces'
import { xyzFromLab } from '../tone/lab'
import { lightnessFromLuminance } from '../tone/lightness'
import type { LabPoint } from '../tone/looks'
import { transform } from '../tone/matrix'
import type { ColourPath } from './colour-path'
import { shareAlongPath } from './colour-path'

/** A patch as it was read: lightness in the channel it was read in, and its colour where a scan told it. */
export interface ColourPatch { lightness: number, lab: LabPoint | null }

/** Reflectances below this (density 4) are taken as it: beyond it lies the scanner's own noise. */
const leastReflectance = 1e-4
const bands = { 'density-red': 0, 'density-green': 1, 'density-blue': 2 } as const

/**
 * The value of a patch in a bench's reading channel, 0 … 100, lighter prints having more:
 *
 * - `lightness`: CIE L*, D50;
 * - `density-blue | -green | -red`: the lightness L*(10^−D) of the density D behind that filter. From a scan,
 *   D = −log₁₀ of linear sRGB's blue, green or red (IEC 61966-2-1, adapted from D50 by linear Bradford; ≥ 10⁻⁴): three bands
 *   near a status's, made of the scan's own colours. It is not ISO status density: compare it with its own kind only;
 * - `colour-path`: per cent of the bench's own colour path, 0 its deepest tone, 100 paper.
 * @throws ComputeError `reading_unfit` where a colour is needed and the patch has none.
 */
export function channelValue(patch: ColourPatch, channel: ReadingChannel, path: ColourPath | null): number {
  if (channel === 'lightness') return patch.lightness
  if (channel === 'colour-path') {
    if (!patch.lab || !path) throw new ComputeError('reading_unfit', 'This bench is read along its own colour path, which needs a scan in colour. Scan the print in colour, or choose lightness as the bench’s reading channel.')
    return 100 * shareAlongPath(path, patch.lab)
  }
  // Typed densities come as that channel's own lightness already.
  return patch.lab ? filterLightness(patch.lab, channel) : patch.lightness
}

/** Density behind a filter, from a patch's colour; see `channelValue`. */
export function filterDensity(lab: LabPoint, channel: keyof typeof bands): number {
  return -Math.log10(Math.max(leastReflectance, transform(srgbFromXyz, xyzFromLab(lab))[bands[channel]]))
}

const filterLightness = (lab: LabPoint, channel: keyof typeof bands): number =>
  Math.min(100, lightnessFromLuminance(10 ** -filterDensity(lab, channel)))
