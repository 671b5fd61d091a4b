/** How a print's net density grows with log₁₀ exposure, as shares 0 … 1 of its greatest; each rises along the whole axis. */
const rawShapes = {
  logistic: (z: number) => 1 / (1 + Math.exp(-z)),
  /** Richards curves, the one slow to start, the other slow to end */
  toe: (z: number) => (1 + 3 * Math.exp(-z)) ** (-1 / 3),
  shoulder: (z: number) => (1 + 0.25 * Math.exp(-z)) ** -4,
  /** one photon, one grain: 1 − e^(−H) */
  photochemical: (z: number) => 1 - Math.exp(-Math.exp(z)),
}
export type PaperShape = keyof typeof rawShapes

/** Net density share at base exposure and, one exposure scale less, at the first trace of tone. */
const [full, trace] = [0.985, 0.015]

/** Share of net density at a log exposure counted from the base exposure (0), falling by one exposure scale to −scale. */
export function paperCurve(shape: PaperShape, exposureScale: number): (logExposure: number) => number {
  const raw = rawShapes[shape]
  const [top, bottom] = [whereReached(raw, full), whereReached(raw, trace)]
  return logExposure => raw(top + (top - bottom) * logExposure / exposureScale)
}

function whereReached(rising: (z: number) => number, value: number): number {
  let [low, high] = [-40, 40]
  for (let i = 0; i < 80; i++) {
    const middle = (low + high) / 2
    if (rising(middle) < value) low = middle
    else high = middle
  }
  return high
}
