import { monomials } from './monomials'
import type { SeededRandom } from './random'

/** Waves of the tone axis that must not follow the position: cos(πju), j = 1 … 10. */
const waves = 10
const degree = 3
const tries = 3000

interface Place { x: number, y: number }

/**
 * Swaps values of the tone axis between cells of one block, in place, wherever that lessens the sum of squared correlations
 * between cos(πju), j = 1 … 10, and the monomials of the position up to degree 3. About 3000 tries, block after block.
 */
export function placeBalanced(axis: Float64Array, places: readonly Place[], blocks: readonly number[][], random: SeededRandom): void {
  const positions = standardised(monomials(places, degree), places.length)
  const tones = centredWaves(axis)
  const width = positions.length / axis.length
  let balance = products(tones, positions, axis.length)
  for (let attempt = 0; attempt < tries; attempt++) {
    const block = blocks[attempt % blocks.length]!
    const [i, j] = [block[random.below(block.length)]!, block[random.below(block.length)]!]
    const swapped = afterSwap(balance, tones, positions, width, i, j, axis.length)
    if (squares(swapped) >= squares(balance)) continue
    balance = swapped
    swapRows(axis, 1, i, j)
    swapRows(tones, waves, i, j)
  }
}

/** Sum of squared correlations between tone and position of a layout; 0 would be perfect balance. */
export function imbalance(axis: Float64Array, places: readonly Place[]): number {
  return squares(products(centredWaves(axis), standardised(monomials(places, degree), places.length), axis.length))
}

const squares = (values: Float64Array): number => values.reduce((sum, v) => sum + v * v, 0)

function centredWaves(axis: Float64Array): Float64Array {
  const values = Float64Array.from({ length: axis.length * waves }, (_, at) => Math.cos(Math.PI * (at % waves + 1) * axis[Math.floor(at / waves)]!))
  return standardised(values, axis.length)
}

/** Columns (by rows, `rows` of them) less their mean, over their standard deviation. */
function standardised(values: Float64Array, rows: number): Float64Array {
  const width = values.length / rows
  const result = values.slice()
  for (let column = 0; column < width; column++) {
    let [sum, square] = [0, 0]
    for (let at = column; at < values.length; at += width) sum += values[at]!
    const mean = sum / rows
    for (let at = column; at < values.length; at += width) square += (values[at]! - mean) ** 2
    const deviation = Math.sqrt(square / rows)
    for (let at = column; at < values.length; at += width) result[at] = (values[at]! - mean) / deviation
  }
  return result
}

/** Correlations of every wave with every monomial. */
function products(tones: Float64Array, positions: Float64Array, rows: number): Float64Array {
  const width = positions.length / rows
  const sums = new Float64Array(waves * width)
  for (let row = 0; row < rows; row++)
    for (let wave = 0; wave < waves; wave++)
      for (let k = 0; k < width; k++) sums[wave * width + k]! += tones[row * waves + wave]! * positions[row * width + k]! / rows
  return sums
}

function afterSwap(balance: Float64Array, tones: Float64Array, positions: Float64Array, width: number, i: number, j: number, rows: number): Float64Array {
  return balance.map((value, at) => {
    const [wave, k] = [Math.floor(at / width), at % width]
    const change = (tones[j * waves + wave]! - tones[i * waves + wave]!) * (positions[i * width + k]! - positions[j * width + k]!)
    return value + change / rows
  })
}

function swapRows(values: Float64Array, width: number, i: number, j: number): void {
  for (let k = 0; k < width; k++) [values[i * width + k], values[j * width + k]] = [values[j * width + k]!, values[i * width + k]!]
}
