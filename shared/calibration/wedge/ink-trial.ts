import { layoutWedge, type WedgeGrid } from '../wedge-layout'

/** What stands in a cell of an ink trial: which of the mixes, and its ink level. */
export interface TrialCell { mix: number, level: number }

/** Cells of a block, which holds all levels once. */
const blockColumns = 8
const blockRows = 4
const levelSteps = 255

/**
 * An ink trial: a scattered wedge whose cells are shared out among the mixes, each of which gets a whole ramp, scattered like
 * the wedge's. In a block the cells go to the mixes in turn by rising level, the first mix moving on from block to block; each
 * mix's levels are then stretched to run from clear to full ink and rounded to 8-bit codes. Row by row, as the print reads.
 * @throws ComputeError `invalid_input` for a grid that is none or a seed that is no 32-bit integer.
 */
export function inkTrialCells(grid: WedgeGrid, seed: number, mixCount: number): TrialCell[] {
  const { columns, cells } = layoutWedge({ grid, seed })
  const mixes = new Array<number>(cells.length)
  const blocksAcross = columns / blockColumns
  const blockOf = (i: number): number => Math.floor(cells[i]!.row / blockRows) * blocksAcross + Math.floor(cells[i]!.column / blockColumns)
  const inBlock = new Map<number, number[]>()
  cells.forEach((_, i) => inBlock.set(blockOf(i), [...inBlock.get(blockOf(i)) ?? [], i]))
  for (const [block, members] of inBlock) {
    members.sort((a, b) => cells[a]!.level - cells[b]!.level || a - b).forEach((cell, rank) => mixes[cell] = (rank + block) % mixCount)
  }
  const ranges = Array.from({ length: mixCount }, (_, mix) => {
    const levels = cells.filter((_, i) => mixes[i] === mix).map(cell => cell.level)
    return [Math.min(...levels), Math.max(...levels)] as const
  })
  return cells.map(({ level }, i) => {
    const mix = mixes[i]!
    const [least, greatest] = ranges[mix]!
    return { mix, level: Math.round(levelSteps * (level - least) / (greatest - least)) / levelSteps }
  })
}
