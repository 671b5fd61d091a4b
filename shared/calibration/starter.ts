import type { Process } from '../schemas/benches'
import { ComputeError } from '../errors'
import { densityFromLightness, lightnessFromDensity } from '../tone/density'
import { responsePoints } from '../tone/response'

/**
 * What is assumed of a process until a wedge of one's own is read. All figures and ways of working: common practice, no source.
 * They are rounded and on the cautious side; none is a measurement, and none is meant to replace one.
 */
interface StarterAssumption {
  /** how the process is named in a sentence */
  name: string
  /** log₁₀ of the exposures between 1 % and 99 % of the print's density range */
  exposureScale: number
  deepestLightness: number
  paperLightness: number
  /** how the print is taken to be made */
  made: string
  /** what its base exposure is the shortest for */
  baseExposure: string
}

const fullBlack = 'full black through clear film'

const starters: Partial<Record<Process, StarterAssumption>> = {
  'cyanotype': { name: 'cyanotype', exposureScale: 1.5, deepestLightness: 25, paperLightness: 93,
    made: 'in two parts, one coat, washed in water, and read once it has dried and turned its full blue', baseExposure: fullBlack },
  'van-dyke': { name: 'Van Dyke brown', exposureScale: 1.9, deepestLightness: 24, paperLightness: 92,
    made: 'in one coat, washed, fixed, untoned, and read dry: it darkens as it dries', baseExposure: fullBlack },
  'salt': { name: 'salt print', exposureScale: 2.1, deepestLightness: 28, paperLightness: 92,
    made: 'printed out, untoned, and read after fixing and drying, which change it', baseExposure: 'the density you want after fixing and drying, since a printing-out print goes on darkening' },
  'kallitype': { name: 'kallitype', exposureScale: 1.8, deepestLightness: 21, paperLightness: 93,
    made: 'developed out, without a contrast agent, cleared and fixed, untoned', baseExposure: fullBlack },
  'platinum-palladium': { name: 'platinum/palladium', exposureScale: 1.9, deepestLightness: 22, paperLightness: 93,
    made: 'in a mixture of both metals, without a contrast agent, developed out and cleared', baseExposure: fullBlack },
  'gum': { name: 'gum (one dark layer)', exposureScale: 1.2, deepestLightness: 38, paperLightness: 92,
    made: 'as a single layer of dark pigment; more layers are another curve', baseExposure: 'a layer that survives the development under clear film' },
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
  const assumed = requireStarter(process)
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

/** Ink level, per cent, at which 1 % of the print's density range is left: the exposure scale over the film's density. */
const lastToneLevel = ({ exposureScale }: StarterAssumption): number => Math.round(100 * exposureScale / assumedFullInkDensity)

const sentences = (assumed: StarterAssumption): string[] => [
  'Uncalibrated: nothing of this bench has been measured yet.',
  `The print is taken to be made ${assumed.made} (common practice, no source).`,
  `Full ink is taken as UV density ${assumedFullInkDensity} above clear film, and density as proportional to ink (common practice, no source).`,
  `The exposure scale of ${assumed.name} is taken as ${assumed.exposureScale} in log exposure, from 1 % to 99 % of the print's density range (common practice, no source).`,
  `So 1 % of the print's density range is left at ${lastToneLevel(assumed)} % ink (computed from the two): with a film that blocks less, the lights come out grey.`,
  'Between deepest tone and paper the print\'s density is taken to follow a logistic curve in log exposure (an assumption of ours, no source).',
  `The deepest tone is taken as L* ${assumed.deepestLightness}, the paper as L* ${assumed.paperLightness} (common practice, no source).`,
  `The base exposure is taken as the shortest that gives ${assumed.baseExposure}.`,
]

/**
 * What a process's starter stands on, in one line for lists.
 * @throws ComputeError `no_starter_curve` for a process without one (carbon, other).
 */
export function starterInShort(process: Process): string {
  const { exposureScale, deepestLightness } = requireStarter(process)
  return `Assumes an exposure scale of ${exposureScale}, a film of UV density ${assumedFullInkDensity} and a deepest tone of L* ${deepestLightness}.`
}

function requireStarter(process: Process): StarterAssumption {
  const assumed = starters[process]
  if (!assumed) throw new ComputeError('no_starter_curve', 'There is no starter curve for this process. Set up a bench and read a wedge first.')
  return assumed
}
