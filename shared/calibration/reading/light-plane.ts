import type { Point, ScanPicture } from './picture'

/** Points of the picture along a pixel of the plane that its mean takes at most. */
const pointsAlong = 3

/** Means of a picture's linear light over squares around a place, XYZ. */
export type LightAround = (centrePx: Point, halfSidePx: number) => [number, number, number]

/**
 * A coarse plane of a picture's light with running sums (Crow, SIGGRAPH 1984: summed-area tables), so that the light around any
 * place comes at once. `pixelPx` is the side of its pixels in the picture; parts of a square outside the picture don't count.
 */
export function lightAround(picture: ScanPicture, pixelPx: number): LightAround {
  const step = Math.max(1, Math.floor(pixelPx))
  const [width, height] = [Math.ceil(picture.width / step), Math.ceil(picture.height / step)]
  const sums = summedArea(picture, step, width, height)
  const { xyz } = picture.colour
  const stride = width + 1
  return ([cx, cy], halfSidePx) => {
    const side = halfSidePx / step
    const [x0, x1] = range(cx / step, side, width)
    const [y0, y1] = range(cy / step, side, height)
    const [r, g, b] = sums.map(s => (s[y1 * stride + x1]! - s[y0 * stride + x1]! - s[y1 * stride + x0]! + s[y0 * stride + x0]!) / ((x1 - x0) * (y1 - y0))) as [number, number, number]
    return [0, 1, 2].map(k => xyz[k]![0] * r + xyz[k]![1] * g + xyz[k]![2] * b) as [number, number, number]
  }
}

function range(centre: number, half: number, size: number): [number, number] {
  const from = Math.min(size - 1, Math.max(0, Math.round(centre - half)))
  return [from, Math.max(from + 1, Math.min(size, Math.round(centre + half)))]
}

function summedArea(picture: ScanPicture, step: number, width: number, height: number): [Float64Array, Float64Array, Float64Array] {
  const sums = [0, 1, 2].map(() => new Float64Array((width + 1) * (height + 1))) as [Float64Array, Float64Array, Float64Array]
  const box = new Float64Array(3)
  for (let y = 0; y < height; y++) {
    let red = 0, green = 0, blue = 0
    for (let x = 0; x < width; x++) {
      boxMean(picture, x * step, y * step, step, box)
      red += box[0]!
      green += box[1]!
      blue += box[2]!
      const at = (y + 1) * (width + 1) + x + 1
      const above = at - width - 1
      sums[0][at] = sums[0][above]! + red
      sums[1][at] = sums[1][above]! + green
      sums[2][at] = sums[2][above]! + blue
    }
  }
  return sums
}

/** Mean linear channels of a few points in a box, into `out`. */
function boxMean({ codes, channels, width, height, colour: { linear } }: ScanPicture, x0: number, y0: number, step: number, out: Float64Array): void {
  const jump = Math.max(1, Math.floor(step / pointsAlong))
  const g = channels === 1 ? 0 : 1
  const b = channels === 1 ? 0 : 2
  const x1 = Math.min(width, x0 + step), y1 = Math.min(height, y0 + step)
  let red = 0, green = 0, blue = 0, n = 0
  for (let y = y0; y < y1; y += jump) {
    for (let x = x0; x < x1; x += jump) {
      const at = (y * width + x) * channels
      red += linear[codes[at]!]!
      green += linear[codes[at + g]!]!
      blue += linear[codes[at + b]!]!
      n++
    }
  }
  out[0] = red / n
  out[1] = green / n
  out[2] = blue / n
}
