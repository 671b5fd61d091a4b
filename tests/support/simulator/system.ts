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
export interface PrintSystem {
  film: FilmShape
  paper: PaperShape
  exposureScale: number
  lightness: (level: number, disturbance?: Disturbance) => number
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
