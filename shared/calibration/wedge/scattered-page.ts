import { ComputeError } from '../../errors'
import { bandsMm, layOutFrame } from './frame'
import type { SizeMm } from '../../sheet/sizes'
import type { WedgeGrid } from '../wedge-layout'
import type { RectMm, WedgePage } from './page'
import { rect } from './page'
import { waysToLie } from './sheet'

/** Side of a scattered wedge's cell, mm. */
export const cellSideMm = 7

/** Grids of cells that a scattered wedge is made in, the largest first. */
export const scatteredGrids = [{ columns: 24, rows: 24 }, { columns: 24, rows: 16 }, { columns: 16, rows: 12 }] as const
export type ScatteredGrid = typeof scatteredGrids[number]

/** The page of a scattered wedge: cells of 7 mm without gaps, row by row from the top left. */
export function scatteredPage({ columns, rows }: ScatteredGrid): WedgePage {
  const frame = layOutFrame(columns * cellSideMm, rows * cellSideMm)
  const patches: RectMm[] = []
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      patches.push(rect(frame.field.xMm + column * cellSideMm, frame.field.yMm + row * cellSideMm, cellSideMm))
    }
  }
  return { ...frame, kind: 'scattered', columns, rows, patches, pixelsPerInch: null }
}

/**
 * The largest grid for a sheet of the given size (mm, either way round): 24 × 24 takes 200 × 194 mm, 24 × 16 takes 200 × 138 mm,
 * 16 × 12 takes 144 × 110 mm. One that leaves the margin that inkjets need goes first, unless the sheet is cut to a film's size.
 * @throws ComputeError `invalid_input` when not even the smallest fits.
 */
export function gridForSheet(widthMm: number, heightMm: number): ScatteredGrid {
  const sheet = { widthMm, heightMm }
  const room = scatteredGrids.map(grid => waysToLie(pageSize(grid), sheet)[0]?.room)
  const best = room.findIndex(kind => kind === 'ample' || kind === 'exact')
  const found = scatteredGrids[best < 0 ? room.indexOf('tight') : best]
  if (!found) throw new ComputeError('invalid_input', `The smallest wedge takes 144 × 110 mm of film; ${widthMm} × ${heightMm} mm is too small for it.`)
  return found
}

const pageSize = ({ columns, rows }: ScatteredGrid): SizeMm =>
  ({ widthMm: bandsMm.left + columns * cellSideMm + bandsMm.right, heightMm: bandsMm.top + rows * cellSideMm + bandsMm.bottom })

/** The name that plans call a grid by. */
export const gridName = ({ columns, rows }: ScatteredGrid): WedgeGrid => `${columns}x${rows}` as WedgeGrid
