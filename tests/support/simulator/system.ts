import type { SeededRandom } from '../../../shared/calibration/random'
import { lightnessFromDensity } from '../../../shared/tone/density'
import type { FilmShape } from './film'
import { filmShapes } from './film'
import type { PaperShape } from './paper'
import { paperCurve } from './paper'

/** What parts one print from the next, at one place: change of log exposure, and share added to the coating. */
export interface Disturbance { exposure: number, coating: number }
export const undisturbed: Disturbance = { exposure: 0, coating: 0 }

/** A film, ink, paper and lamp: what lightness an ink level prints as. */
export interface PrintedBench {
  lightness: (level: number, disturbance?: Disturbance) => number
}

/** A bench with what it was drawn from. */
export interface PrintSystem extends PrintedBench {
  film: FilmShape
  paper: PaperShape
  exposureScale: number
}

export interface SystemRange { exposureScaleFrom: number, exposureScaleTo: number }

/** A system drawn at random: any film with any paper, exposure scale evenly from the range, densities as prints have them. */
export function drawSystem(random: SeededRandom, { exposureScaleFrom, exposureScaleTo }: SystemRange = { exposureScaleFrom: 0.6, exposureScaleTo: 2.8 }): PrintSystem {
  const between = (least: number, greatest: number): number => least + (greatest - least) * random.uniform()
  const pick = <T>(items: readonly T[]): T => items[random.below(items.length)]!
  const film = pick(Object.keys(filmShapes) as FilmShape[])
  const paper = pick<PaperShape>(['logistic', 'toe', 'shoulder', 'photochemical'])
  const exposureScale = between(exposureScaleFrom, exposureScaleTo)
  const [paperDensity, netDensity, fullInk] = [between(0.04, 0.1), between(0.95, 1.5), exposureScale * between(1, 1.3)]
  const share = paperCurve(paper, exposureScale)
  const lightness = (level: number, { exposure, coating } = undisturbed): number =>
    lightnessFromDensity(paperDensity + netDensity * (1 + coating) * share(exposure - fullInk * filmShapes[film](level)))
  return { film, paper, exposureScale, lightness }
}

/**
 * The same bench with shadows that reverse: below `upTo` ink clear film prints ever lighter, so that it is `dip` L* lighter
 * than the deepest tone, which lies at `darkestLevel`.
 */
export function withReversal(bench: PrintedBench, dip: number, upTo: number): { bench: PrintedBench, darkestLevel: number } {
  const levels = Array.from({ length: 401 }, (_, i) => i / 400)
  const lightnessWith = (rise: number): PrintedBench['lightness'] => (level, disturbance) => bench.lightness(level, disturbance) + rise * Math.max(0, 1 - level / upTo) ** 2
  const dipOf = (lightness: PrintedBench['lightness']): number => lightness(0) - Math.min(...levels.map(level => lightness(level)))
  let [less, more] = [0, 60]
  for (let i = 0; i < 40; i++) {
    const middle = (less + more) / 2
    if (dipOf(lightnessWith(middle)) < dip) less = middle
    else more = middle
  }
  const lightness = lightnessWith(more)
  return { bench: { lightness }, darkestLevel: levels.reduce((darkest, level) => lightness(level) < lightness(darkest) ? level : darkest, 0) }
}
