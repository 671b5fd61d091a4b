import { describe, expect, it } from 'vitest'
import { responseThroughFilm, splitFilmFromPaper } from '../../../shared/calibration/film-densities'
import { seededRandom } from '../../../shared/calibration/random'
import { fitWedge } from '../../../shared/calibration/wedge-fit'
import { layoutWedge } from '../../../shared/calibration/wedge-layout'
import { nominalTablet } from '../../../shared/calibration/step-tablet'
import { lightnessFromDensity } from '../../../shared/tone/density'
import { responsePoints, valueAt } from '../../../shared/tone/response'
import { filmShapes } from '../../support/simulator/film'
import { paperCurve, type PaperShape } from '../../support/simulator/paper'
import { printQualities } from '../../support/simulator/print'
import { printWedge } from '../../support/simulator/wedge'
import type { PrintSystem } from '../../support/simulator/system'

const fullInk = 1.9
const filmDensity = (level: number): number => fullInk * filmShapes.dotGain(level)

/** A paper of the simulator, by log exposure from its base exposure. */
function paperOf(shape: PaperShape, exposureScale: number, paperDensity: number, netDensity: number) {
  const share = paperCurve(shape, exposureScale)
  return (logExposure: number, coating = 0): number => lightnessFromDensity(paperDensity + netDensity * (1 + coating) * share(logExposure))
}
const first = paperOf('logistic', 1.6, 0.07, 1.3)
const second = paperOf('toe', 1.7, 0.06, 1.15)
const systemOf = (paper: typeof first): PrintSystem => ({
  film: 'dotGain', paper: 'logistic', exposureScale: 1.6,
  lightness: (level, { exposure, coating } = { exposure: 0, coating: 0 }) => paper(exposure - filmDensity(level), coating),
})
const tabletOn = (paper: typeof first, seed: number) => {
  const random = seededRandom(seed)
  return nominalTablet().flatMap(density => [0, 1].map(() => ({ density, lightness: paper(0.1 - density) + 0.4 * random.normal() })))
}
/** The wedge lies on the same print as the tablet: its exposure is 0.1 above the simulator's base exposure as well. */
const wedgeOn = (paper: typeof first, seed: number) =>
  fitWedge([printWedge(systemOf((log, coating) => paper(log + 0.1, coating)), layoutWedge({ grid: '24x16', seed }), printQualities.careful, seededRandom(seed))])

describe('film split from paper', () => {
  const film = splitFilmFromPaper(wedgeOn(first, 1), tabletOn(first, 2))

  it('gives the UV density of each ink level, exactly where the print has tones', () => {
    const errors = film.filter(f => f.deviation < 0.03).map(f => Math.abs(f.density - filmDensity(f.level)))
    expect(errors.length).toBeGreaterThan(25)
    expect(Math.max(...errors)).toBeLessThan(0.05)
  })

  it('says where it does not know: in black and white the deviation is far greater', () => {
    const smallest = Math.min(...film.map(f => f.deviation))
    expect(film[0]!.deviation).toBeGreaterThan(5 * smallest)
    expect(film.at(-1)!.deviation).toBeGreaterThan(2 * smallest)
    film.forEach((f, i) => expect(f.density).toBeGreaterThanOrEqual(i === 0 ? 0 : film[i - 1]!.density))
  })

  it('holds the truth within two deviations nearly everywhere', () => {
    const within = film.filter(f => Math.abs(f.density - filmDensity(f.level)) < 2 * f.deviation + 0.01).length
    expect(within / film.length).toBeGreaterThan(0.9)
  })

  it('gives a new paper\'s response from a tablet strip alone, and its band holds the truth', () => {
    const { response, low, high } = responseThroughFilm(film, tabletOn(second, 3))
    const levels = Array.from({ length: responsePoints }, (_, i) => i / (responsePoints - 1))
    const truth = levels.map(level => second(0.1 - filmDensity(level)))
    const errors = truth.map((l, i) => Math.abs(l - response[i]!))
    expect(Math.max(...errors)).toBeLessThan(2.5)
    expect(truth.filter((l, i) => l >= low[i]! - 0.05 && l <= high[i]! + 0.05).length / responsePoints).toBeGreaterThan(0.95)
    for (let i = 1; i < responsePoints; i++) if (response[i]! < response[i - 1]!) expect.fail(`falls at ${i}`)
    // The stated transfer shows: the band is wider than the tablet's own would be, by 0.02 density at a slope of tens of L*.
    expect(valueAt(high, 0.4) - valueAt(low, 0.4)).toBeGreaterThan(1)
  })

  it('is refused where wedge and tablet share no tones', () => {
    const flat = { response: new Float64Array(responsePoints).fill(20), low: new Float64Array(responsePoints).fill(10), high: new Float64Array(responsePoints).fill(30) }
    expect(() => splitFilmFromPaper(flat, tabletOn(first, 4))).toThrowError(expect.objectContaining({ code: 'range_too_small' }))
  })
})
