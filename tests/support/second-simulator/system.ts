import type { SeededRandom } from '../../../shared/calibration/random'
import { lightnessFromDensity } from '../../../shared/tone/density'
import { undisturbed, type PrintedBench } from '../simulator/system'

/**
 * Benches of another make than the first simulator's: films that hold back light dot by dot, papers that print two grains of
 * different speed or mask themselves, deeper and weaker blacks. No formula is shared with it.
 */
export function drawOtherSystem(random: SeededRandom): PrintedBench {
  const between = (least: number, greatest: number): number => least + (greatest - least) * random.uniform()
  const exposureScale = between(0.7, 2.6)
  const film = dottedFilm(exposureScale * between(1, 1.35), between(1.5, 4), between(0.9, 1.3))
  const paper = random.uniform() < 0.5 ? twoGrains(exposureScale, between(0.2, 0.8), between(0.1, 0.4)) : selfMasking(exposureScale)
  const [paperDensity, netDensity] = [between(0.03, 0.13), between(0.8, 1.7)]
  return {
    lightness: (level, { exposure, coating } = undisturbed) =>
      lightnessFromDensity(paperDensity + netDensity * (1 + coating) * paper(exposure - film(level))),
  }
}

/**
 * Film of drops that fall at random and overlap: the covered share is 1 − e^(−drops·a), a = level^gain, and light passes as
 * Yule and Nielsen (Journal of the Franklin Institute, 1951) have it with a 50th of the light through a drop, scaled to its full density.
 */
function dottedFilm(fullDensity: number, drops: number, gain: number): (level: number) => number {
  const passed = 0.02
  const raw = (level: number): number => -Math.log10(1 - (1 - Math.exp(-drops * level ** gain)) * (1 - passed))
  return level => fullDensity * raw(level) / raw(1)
}

/** Two grains of different speed, each answering like a normal distribution's sum to log exposure. */
function twoGrains(exposureScale: number, share: number, apart: number): (logExposure: number) => number {
  const [fast, slow] = [-apart * exposureScale / 2, apart * exposureScale / 2]
  const width = exposureScale * (1 - apart / 2) / 4.4
  const raw = (h: number): number => share * normalSum((h - fast) / width) + (1 - share) * normalSum((h - slow) / width)
  const base = exposureScale / 2
  return h => raw(h + base)
}

/** A print-out image that shades itself: density as the logarithm of what light has made, until the salt is used up. */
function selfMasking(exposureScale: number): (logExposure: number) => number {
  const slope = 1.9 / exposureScale
  const raw = (h: number): number => Math.log10(1 + 40 * 10 ** (slope * h) / (1 + 10 ** (slope * h - 0.6)))
  const most = raw(30)
  return h => raw(h) / most
}

/** Φ by Abramowitz and Stegun 26.2.17. */
function normalSum(z: number): number {
  const t = 1 / (1 + 0.2316419 * Math.abs(z))
  const tail = Math.exp(-z * z / 2) / Math.sqrt(2 * Math.PI) * t * (0.31938153 + t * (-0.356563782 + t * (1.781477937 + t * (-1.821255978 + t * 1.330274429))))
  return z > 0 ? 1 - tail : tail
}
