/** A point, x right and y down. */
export type Point = readonly [number, number]

/** How page coordinates (mm) fall into a picture's pixels. */
export interface Camera { width: number, height: number, toPicture: (pageMm: Point) => Point }

/** Spacing of the nodes at which the map is inverted, pixels. */
export const nodeSpacing = 16

/**
 * Page coordinates at every 16th pixel of a picture, from its top-left corner: Newton's method on the forward map with numeric
 * derivatives, starting from the neighbouring node's answer.
 */
export function pageAtNodes({ width, height, toPicture }: Camera, startMm: Point): { columns: number, rows: number, pages: Float64Array } {
  const [columns, rows] = [Math.ceil(width / nodeSpacing) + 1, Math.ceil(height / nodeSpacing) + 1]
  const pages = new Float64Array(2 * columns * rows)
  for (let j = 0; j < rows; j++) {
    for (let i = 0; i < columns; i++) {
      const at = 2 * (j * columns + i)
      const from = i > 0 ? at - 2 : j > 0 ? at - 2 * columns : -1
      const start: Point = from < 0 ? startMm : [pages[from]!, pages[from + 1]!]
      const [x, y] = invert(toPicture, [i * nodeSpacing, j * nodeSpacing], start, from < 0 ? 30 : 5)
      pages[at] = x
      pages[at + 1] = y
    }
  }
  return { columns, rows, pages }
}

function invert(toPicture: Camera['toPicture'], target: Point, start: Point, passes: number): Point {
  let x = start[0], y = start[1]
  const d = 0.01
  for (let pass = 0; pass < passes; pass++) {
    const [u, v] = toPicture([x, y])
    const du = target[0] - u, dv = target[1] - v
    if (Math.abs(du) + Math.abs(dv) < 1e-4) break
    const [ux, vx] = toPicture([x + d, y])
    const [uy, vy] = toPicture([x, y + d])
    const a = (ux - u) / d, b = (uy - u) / d, c = (vx - v) / d, e = (vy - v) / d
    const determinant = a * e - b * c
    x += (e * du - b * dv) / determinant
    y += (a * dv - c * du) / determinant
  }
  return [x, y]
}
