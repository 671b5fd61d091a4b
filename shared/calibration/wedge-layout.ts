import { ComputeError } from '../errors'
import type { SeededRandom } from './random'
import { seededRandom } from './random'
import { placeBalanced } from './wedge-balance'

/** The scattered wedges by their columns and rows of cells. */
export const wedgeGrids = {
  /** half an A4: 168 × 112 mm of cells */
  '24x16': { columns: 24, rows: 16 },
  '16x12': { columns: 16, rows: 12 },
  /** A4: 168 × 168 mm of cells */
  '24x24': { columns: 24, rows: 24 },
} as const
export type WedgeGrid = keyof typeof wedgeGrids

/** All that a wedge is laid out from: kept with the wedge, it gives the same wedge again. */
export interface WedgeRecord { grid: WedgeGrid, seed: number }

/** Side of a square cell, mm; its inner 75 % is read. */
export const cellMm = 7
export const readShare = 0.75

/** A block is a complete coarse wedge of its own. */
const block = { columns: 8, rows: 4 }
const blockLevels = block.columns * block.rows
/** Levels are codes of 8 bits, so that paths of 8 and of 16 bits print the same wedge. */
const levelSteps = 255

/** One cell. `x`, `y` are its centre, −1 … 1 across the cells; `xMm`, `yMm` its top left corner from that of the cells. */
export interface WedgeCell { column: number, row: number, level: number, x: number, y: number, xMm: number, yMm: number }
export interface WedgeLayout { columns: number, rows: number, widthMm: number, heightMm: number, cells: WedgeCell[] }

/**
 * A wedge whose levels are scattered, so that uneven coating and light cannot look like tone. Cells come row by row, as the
 * print reads.
 *
 * Every block of 8 × 4 cells holds 32 levels: u = (i + vdc₂(b) + ½/blocks) / 32 for block b (vdc₂ the van der Corput sequence of
 * base 2: Verhandelingen Koninklijke Akademie 38, 1935), all u rescaled to 0 … 1, then denser at both ends,
 * n = ½u + ¼(1 − cos πu), rounded to 8-bit codes. Within the blocks levels are shuffled and then swapped to balance them
 * (`placeBalanced`). The same record gives the same wedge on every machine.
 * @throws ComputeError `invalid_input` for a grid that is none or a seed that is no 32-bit integer.
 */
export function layoutWedge({ grid, seed }: WedgeRecord): WedgeLayout {
  if (!Object.hasOwn(wedgeGrids, grid) || seed !== (seed | 0)) throw new ComputeError('invalid_input', 'This wedge cannot be laid out: its record is damaged.')
  const { columns, rows } = wedgeGrids[grid]
  const blocks = blockCells(columns, rows)
  const places = cellPlaces(columns, rows)
  const axis = shuffledAxis(blocks, seededRandom(seed))
  placeBalanced(axis, places, blocks, seededRandom(seed + 1))
  const cells = places.map((place, i) => ({ ...place, level: levelOf(axis[i]!) }))
  return { columns, rows, widthMm: columns * cellMm, heightMm: rows * cellMm, cells }
}

/** Where the cells of a grid lie, row by row, `xMm` and `yMm` being their centres counted from the middle of all cells. */
export function cellPlacesOf(grid: WedgeGrid): { x: number, y: number, xMm: number, yMm: number }[] {
  const { columns, rows } = wedgeGrids[grid]
  return cellPlaces(columns, rows).map(({ x, y }) => ({ x, y, xMm: x * columns * cellMm / 2, yMm: y * rows * cellMm / 2 }))
}

/** Base-2 van der Corput number of an index: its binary digits mirrored behind the point. */
export function vanDerCorput(index: number): number {
  let [value, digit] = [0, 0.5]
  for (let rest = index; rest > 0; rest >>= 1, digit /= 2) value += digit * (rest & 1)
  return value
}

const levelOf = (u: number): number => Math.round(levelSteps * (u / 2 + (1 - Math.cos(Math.PI * u)) / 4)) / levelSteps

/** The cell numbers of each block, blocks row by row. */
function blockCells(columns: number, rows: number): number[][] {
  const blocks: number[][] = []
  for (let top = 0; top < rows; top += block.rows)
    for (let left = 0; left < columns; left += block.columns)
      blocks.push(Array.from({ length: blockLevels }, (_, k) => (top + Math.floor(k / block.columns)) * columns + left + k % block.columns))
  return blocks
}

/** The position u of every cell on the tone axis, shuffled within its block. */
function shuffledAxis(blocks: readonly number[][], random: SeededRandom): Float64Array {
  const axis = new Float64Array(blocks.length * blockLevels)
  blocks.forEach((cells, b) => {
    const shuffled = shuffle(cells, random)
    shuffled.forEach((cell, i) => axis[cell] = (i + vanDerCorput(b) + 0.5 / blocks.length) / blockLevels)
  })
  const [least, greatest] = [Math.min(...axis), Math.max(...axis)]
  return axis.map(u => (u - least) / (greatest - least))
}

/** Fisher and Yates. */
function shuffle(items: readonly number[], random: SeededRandom): number[] {
  const shuffled = [...items]
  for (let i = shuffled.length - 1; i > 0; i--) {
    const j = random.below(i + 1)
    ;[shuffled[i], shuffled[j]] = [shuffled[j]!, shuffled[i]!]
  }
  return shuffled
}

function cellPlaces(columns: number, rows: number): Omit<WedgeCell, 'level'>[] {
  return Array.from({ length: columns * rows }, (_, i) => {
    const [column, row] = [i % columns, Math.floor(i / columns)]
    return { column, row, x: (2 * column + 1) / columns - 1, y: (2 * row + 1) / rows - 1, xMm: column * cellMm, yMm: row * cellMm }
  })
}
