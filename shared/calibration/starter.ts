import type { Process } from '../schemas/benches'
import { ComputeError } from '../errors'
import { densityFromLightness, lightnessFromDensity } from '../tone/density'
import { responsePoints } from '../tone/response'

/** What is assumed of a process until a wedge of one's own is read. All figures: common practice, no source. */
interface StarterAssumption {
  /** how the process is named in a sentence */
  name: string
  /** log₁₀ of the exposures between 1 % and 99 % of the print's density range */
  exposureScale: number
  deepestLightness: number
  paperLightness: number
}

const starters: Partial<Record<Process, StarterAssumption>> = {
  'cyanotype': { name: 'cyanotype', exposureScale: 1.5, deepestLightness: 25, paperLightness: 93 },
  'van-dyke': { name: 'Van Dyke brown', exposureScale: 1.9, deepestLightness: 24, paperLightness: 92 },
  'salt': { name: 'salt print', exposureScale: 2.1, deepestLightness: 28, paperLightness: 92 },
  'kallitype': { name: 'kallitype', exposureScale: 1.8, deepestLightness: 21, paperLightness: 93 },
  'platinum-palladium': { name: 'platinum/palladium', exposureScale: 1.9, deepestLightness: 22, paperLightness: 93 },
  'gum': { name: 'gum (one dark layer)', exposureScale: 1.2, deepestLightness: 38, paperLightness: 92 },
}

/** UV density of the film's full ink, above its clear base. */
export const assumedFullInkDensity = 2.5

/** An uncalibrated response with the sentences that it rests on, to be shown wherever it is used. */
export interface StarterResponse { response: number[], assumptions: string[] }

/**
 * A process's starting point before anything is measured: 1025 print lightnesses L* by ink level, clear film first, rising.
 *
 * Model: the film's UV density is proportional to the ink level, 2.5 at full ink; the paper's density falls from its
 * deepest to the paper's own along a logistic in log exposure, 1 % and 99 % of it one exposure scale apart, clear film at
 * the 99 % point (the base exposure); the ends are stretched to the assumed lightnesses exactly.
 * @throws ComputeError `no_starter_curve` for a process without one (carbon, other).
 */
export function starterResponse(process: Process): StarterResponse {
  const assumed = starters[process]
  if (!assumed) throw new ComputeError('no_starter_curve', 'There is no starter curve for this process. Set up a bench and read a wedge first.')
  return { response: modelResponse(assumed), assumptions: sentences(assumed) }
}

/** Logits between 1 % and 99 % of a logistic. */
const logitsPerScale = 2 * Math.log(99)

function modelResponse({ exposureScale, deepestLightness, paperLightness }: StarterAssumption): number[] {
  const [deepest, paper] = [densityFromLightness(deepestLightness), densityFromLightness(paperLightness)]
  const share = (level: number): number => 1 / (1 + Math.exp(-logitsPerScale * (0.5 - level * assumedFullInkDensity / exposureScale)))
  const [most, least] = [share(0), share(1)]
  return Array.from({ length: responsePoints }, (_, i) => {
    const blackness = (share(i / (responsePoints - 1)) - least) / (most - least)
    return i === 0 ? deepestLightness : i === responsePoints - 1 ? paperLightness : lightnessFromDensity(paper + blackness * (deepest - paper))
  })
}

const sentences = ({ name, exposureScale, deepestLightness, paperLightness }: StarterAssumption): string[] => [
  'Uncalibrated: nothing of this bench has been measured yet.',
  `Full ink is taken as UV density ${assumedFullInkDensity} above clear film, and density as proportional to ink (common practice, no source).`,
  `The exposure scale of ${name} is taken as ${exposureScale} in log exposure, from 1 % to 99 % of the print's density range (common practice, no source).`,
  'Between deepest tone and paper the print\'s density is taken to follow a logistic curve in log exposure (an assumption of ours, no source).',
  `The deepest tone is taken as L* ${deepestLightness}, the paper as L* ${paperLightness} (common practice, no source).`,
  'The base exposure is taken as the shortest that gives full black through clear film.',
]
