/**
 * How the UV density of film grows with the ink level, as shares 0 … 1 of its full density. Invented shapes for tests, each
 * rising: what inks and screening do to it in kind, not one film's figures.
 */
export const filmShapes = {
  nearLinear: (n: number) => n ** 1.08,
  dotGain: (n: number) => n + 0.5 * n * (1 - n),
  rollOff: (n: number) => (1 - Math.exp(-1.8 * n)) / (1 - Math.exp(-1.8)),
  sigmoid: (n: number) => 0.45 * n + 0.55 * n * n * (3 - 2 * n),
  ripple: (n: number) => n + 0.01 * Math.sin(2 * Math.PI * 5 * n),
}
export type FilmShape = keyof typeof filmShapes
