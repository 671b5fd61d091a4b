import type { FindingPlane } from './finding-plane'

/** Least difference (of 255) between light and dark near a pixel for it to count as either. */
const leastContrast = 16

/**
 * Marks the pixels that are light for their surroundings (1), all others 0: lighter than half way between the darkest and
 * the lightest value of the tile and its eight neighbours, where these differ at all. `tile` is a tile's side in pixels.
 */
export function lightAreas({ width, height, values }: FindingPlane, tile: number): Uint8Array {
  const [columns, rows] = [Math.ceil(width / tile), Math.ceil(height / tile)]
  const { least, greatest } = tileExtremes({ width, height, values, tile, columns, rows })
  const thresholds = neighbourhoodMiddles(least, greatest, columns, rows)
  const light = new Uint8Array(width * height)
  for (let y = 0; y < height; y++) {
    const row = Math.floor(y / tile) * columns
    for (let x = 0, at = y * width; x < width; x++, at++) {
      if (values[at]! > thresholds[row + ((x / tile) | 0)]!) light[at] = 1
    }
  }
  return light
}

interface Tiling { width: number, height: number, values: Uint8Array, tile: number, columns: number, rows: number }

function tileExtremes({ width, height, values, tile, columns, rows }: Tiling): { least: Uint8Array, greatest: Uint8Array } {
  const [least, greatest] = [new Uint8Array(columns * rows).fill(255), new Uint8Array(columns * rows)]
  for (let y = 0; y < height; y++) {
    const row = Math.floor(y / tile) * columns
    for (let x = 0, at = y * width; x < width; x++, at++) {
      const t = row + ((x / tile) | 0)
      const value = values[at]!
      if (value < least[t]!) least[t] = value
      if (value > greatest[t]!) greatest[t] = value
    }
  }
  return { least, greatest }
}

/** Half way between the extremes of 3 × 3 tiles; 255 (nothing is lighter) where the contrast is too small. */
function neighbourhoodMiddles(least: Uint8Array, greatest: Uint8Array, columns: number, rows: number): Uint8Array {
  const out = new Uint8Array(columns * rows)
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      let [low, high] = [255, 0]
      for (let r = Math.max(0, row - 1); r <= Math.min(rows - 1, row + 1); r++) {
        for (let c = Math.max(0, column - 1); c <= Math.min(columns - 1, column + 1); c++) {
          low = Math.min(low, least[r * columns + c]!)
          high = Math.max(high, greatest[r * columns + c]!)
        }
      }
      out[row * columns + column] = high - low < leastContrast ? 255 : (low + high) >> 1
    }
  }
  return out
}
