export type Corner = [number, number]

/** Top-left, top-right, bottom-right, bottom-left of the print: the order of the contract. */
export const cornerNames = ['Top left', 'Top right', 'Bottom right', 'Bottom left'] as const

/** Where the corners stand before anybody has put them: an eighth inside the picture. */
export function startingCorners(width: number, height: number): Corner[] {
  const [left, top, right, bottom] = [width / 8, height / 8, width * 7 / 8, height * 7 / 8]
  return [[left, top], [right, top], [right, bottom], [left, bottom]]
}

/** The corners with one moved, held within the picture. */
export function withCorner(corners: readonly Corner[], index: number, [x, y]: Corner, width: number, height: number): Corner[] {
  const within = (value: number, most: number) => Math.min(most, Math.max(0, value))
  return corners.map((corner, i) => i === index ? [within(x, width), within(y, height)] : corner)
}

/** What an arrow key moves a corner by, in pixels of the picture; ten times as far with Shift. Null for other keys. */
export function cornerStep(key: string, isFar: boolean): Corner | null {
  const step = isFar ? 10 : 1
  return ({ ArrowLeft: [-step, 0], ArrowRight: [step, 0], ArrowUp: [0, -step], ArrowDown: [0, step] } as Record<string, Corner>)[key] ?? null
}

/**
 * A sentence when four corners cannot be those of a print, else null: they must go round clockwise without crossing
 * (or anticlockwise all, on a mirrored picture) and span a few hundred pixels.
 */
export function cornersProblem(corners: readonly Corner[]): string | null {
  const turns = corners.map((corner, i) => {
    const [next, after] = [corners[(i + 1) % 4]!, corners[(i + 2) % 4]!]
    return (next[0] - corner[0]) * (after[1] - next[1]) - (next[1] - corner[1]) * (after[0] - next[0])
  })
  if (!turns.every(turn => turn > 0) && !turns.every(turn => turn < 0)) return 'The lines between the corners cross. Put each cross on its own corner mark, going round the print.'
  const area = Math.abs(corners.reduce((sum, [x, y], i) => sum + x * corners[(i + 1) % 4]![1] - corners[(i + 1) % 4]![0] * y, 0)) / 2
  return area < 200 * 200 ? 'The corners stand very close together. Put them on the four corner marks of the film.' : null
}
