import type { SeededRandom } from '../../../shared/calibration/random'

/** A plane of linear light. */
export interface Plane { width: number, height: number, values: Float32Array }

/** Gaussian blur of the given standard deviation in pixels, separable; edges repeat. */
export function blur(plane: Plane, sigma: number): void {
  if (sigma <= 0) return
  const reach = Math.ceil(3 * sigma)
  const bell = Float64Array.from({ length: 2 * reach + 1 }, (_, i) => Math.exp(-((i - reach) ** 2) / (2 * sigma * sigma)))
  const total = bell.reduce((sum, k) => sum + k, 0)
  const kernel = bell.map(k => k / total)
  blurRows(plane, kernel, reach)
  blurColumns(plane, kernel, reach)
}

function blurRows({ width, height, values }: Plane, kernel: Float64Array, reach: number): void {
  const line = new Float32Array(width + 2 * reach)
  for (let y = 0; y < height; y++) {
    const row = values.subarray(y * width, (y + 1) * width)
    line.fill(row[0]!, 0, reach)
    line.set(row, reach)
    line.fill(row[width - 1]!, reach + width)
    for (let x = 0; x < width; x++) {
      let sum = 0
      for (let k = 0; k < kernel.length; k++) sum += kernel[k]! * line[x + k]!
      row[x] = sum
    }
  }
}

/** Adds whole rows, so that memory is walked in order; the last rows read are kept aside before they are overwritten. */
function blurColumns({ width, height, values }: Plane, kernel: Float64Array, reach: number): void {
  const kept: Float32Array[] = Array.from({ length: reach + 1 }, () => values.slice(0, width))
  const sums = new Float64Array(width)
  for (let y = 0; y < height; y++) {
    kept.shift()
    kept.push(values.slice(y * width, (y + 1) * width))
    sums.fill(0)
    for (let k = 0; k < kernel.length; k++) {
      const from = k <= reach ? kept[k]! : values.subarray(Math.min(height - 1, y + k - reach) * width)
      const weight = kernel[k]!
      for (let x = 0; x < width; x++) sums[x]! += weight * from[x]!
    }
    for (let x = 0; x < width; x++) values[y * width + x] = sums[x]!
  }
}

/** Adds stray light: each pixel gives `share` of its light to its surroundings, a Gaussian of `radiusPx`. */
export function strayLight(plane: Plane, share: number, radiusPx: number): void {
  if (share <= 0) return
  const factor = Math.max(1, Math.floor(radiusPx / 4))
  const small = reduce(plane, factor)
  blur(small, radiusPx / factor)
  for (let y = 0, at = 0; y < plane.height; y++) {
    for (let x = 0; x < plane.width; x++, at++) {
      plane.values[at] = (1 - share) * plane.values[at]! + share * bilinear(small, (x + 0.5) / factor - 0.5, (y + 0.5) / factor - 0.5)
    }
  }
}

function reduce({ width, height, values }: Plane, factor: number): Plane {
  const [w, h] = [Math.ceil(width / factor), Math.ceil(height / factor)]
  const out = { width: w, height: h, values: new Float32Array(w * h) }
  for (let y = 0; y < h; y++) {
    for (let x = 0; x < w; x++) {
      let [sum, n] = [0, 0]
      for (let v = y * factor; v < Math.min(height, (y + 1) * factor); v++) {
        for (let u = x * factor; u < Math.min(width, (x + 1) * factor); u++) {
          sum += values[v * width + u]!
          n++
        }
      }
      out.values[y * w + x] = sum / n
    }
  }
  return out
}

function bilinear({ width, height, values }: Plane, x: number, y: number): number {
  const [u, v] = [Math.min(Math.max(x, 0), width - 1.001), Math.min(Math.max(y, 0), height - 1.001)]
  const [i, j] = [Math.floor(u), Math.floor(v)]
  const [p, q] = [u - i, v - j]
  const at = j * width + i
  const right = width > 1 ? 1 : 0
  const down = height > 1 ? width : 0
  return (values[at]! * (1 - p) + values[at + right]! * p) * (1 - q) + (values[at + down]! * (1 - p) + values[at + down + right]! * p) * q
}

/** Dust (light or dark dots) and hairs (thin wandering lines), `count` of each per ten million pixels. */
export function soil(plane: Plane, count: number, sizePx: number, random: SeededRandom): void {
  const marks = Math.round(count * plane.width * plane.height / 1e7)
  for (let i = 0; i < marks; i++) {
    dot(plane, random.uniform() * plane.width, random.uniform() * plane.height, sizePx * (0.5 + random.uniform()), random.uniform() < 0.5 ? 0.02 : 0.85)
    hair(plane, sizePx, random)
  }
}

function hair(plane: Plane, sizePx: number, random: SeededRandom): void {
  let [x, y, angle] = [random.uniform() * plane.width, random.uniform() * plane.height, random.uniform() * 2 * Math.PI]
  const tone = random.uniform() < 0.5 ? 0.03 : 0.7
  for (let step = 0; step < 60; step++) {
    dot(plane, x, y, sizePx / 2, tone)
    angle += 0.25 * random.normal()
    x += sizePx * Math.cos(angle)
    y += sizePx * Math.sin(angle)
  }
}

function dot({ width, height, values }: Plane, cx: number, cy: number, radius: number, tone: number): void {
  for (let y = Math.max(0, Math.floor(cy - radius)); y <= Math.min(height - 1, cy + radius); y++) {
    for (let x = Math.max(0, Math.floor(cx - radius)); x <= Math.min(width - 1, cx + radius); x++) {
      if ((x - cx) ** 2 + (y - cy) ** 2 <= radius * radius) values[y * width + x] = tone
    }
  }
}
