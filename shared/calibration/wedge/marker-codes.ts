/** Modules along a marker's side: a frame one module wide of full ink around 4 × 4 modules of pattern. */
export const markerModules = 6
/** Modules along the pattern's side. */
export const patternModules = 4
/** Side of a marker on the film, mm; its module is 1 mm. */
export const markerSideMm = 6

/**
 * Patterns of the markers: bit `4 · row + column` set means full ink (light on the print).
 * Corners top-left, top-right, bottom-right, bottom-left; then four each for the top, right, bottom and left borders.
 * Found by seeded random search so that any two, turned or mirrored in any way, differ in at least 4 modules, and none
 * comes nearer than 4 to a turned or mirrored self: one pattern, with one module misread, tells place, turn and mirroring.
 */
export const markerCodes: readonly number[] = [
  0x5d19, 0x9891, 0x1fc1, 0x3a71,
  0x9f12, 0x3838, 0x3594, 0xe5d6,
  0x14d7, 0x1353, 0x0e4b, 0xc07d,
  0xf9e8, 0xcd10, 0xb259, 0x0ab8,
  0xb946, 0xac8b, 0xa29b, 0x57da,
]

/** First id of each border's four markers. */
export const borderIds = { top: 4, right: 8, bottom: 12, left: 16 } as const

/** True where the module (row and column 0 … 5) of a marker carries full ink. */
export function isInkModule(code: number, row: number, column: number): boolean {
  const [r, c] = [row - 1, column - 1]
  const onFrame = r < 0 || c < 0 || r >= patternModules || c >= patternModules
  return onFrame || ((code >> (patternModules * r + c)) & 1) === 1
}

/**
 * The eight ways a pattern can lie: `turnedPattern(code, k)` turned clockwise by `k & 3` quarter turns after mirroring
 * left and right when `k & 4`.
 */
export function turnedPattern(code: number, k: number): number {
  let out = 0
  for (let row = 0; row < patternModules; row++) {
    for (let column = 0; column < patternModules; column++) {
      let [r, c] = [row, column]
      for (let turn = 0; turn < (k & 3); turn++) [r, c] = [patternModules - 1 - c, r]
      if (k & 4) c = patternModules - 1 - c
      out |= ((code >> (patternModules * r + c)) & 1) << (patternModules * row + column)
    }
  }
  return out
}
