import { wedgeGrids, type WedgeGrid } from '../wedge-layout'
import { layOutFrame } from './frame'
import type { Ground, PageLabel, RectMm, WedgePage } from './page'
import { rect } from './page'
import { cellSideMm } from './scattered-page'

/** Between the code's pad and what stands in the field, mm. */
const insetMm = 2

/** What a guide has inside its frame. */
export interface GuideField { columns: number, rows: number, patches: RectMm[], grounds: Ground[], labels: PageLabel[] }

/** A page with the frame of the scattered wedge of this grid, and what `fill` lays into its field. */
export function guidePage(grid: WedgeGrid, fill: (field: RectMm) => GuideField): WedgePage {
  const { columns, rows } = wedgeGrids[grid]
  const frame = layOutFrame(columns * cellSideMm, rows * cellSideMm)
  const { xMm, yMm, widthMm, heightMm } = frame.field
  const inside = fill(rect(xMm + insetMm, yMm, widthMm - insetMm, heightMm))
  return { ...frame, ...inside, kind: 'guide', labels: [...frame.labels, ...inside.labels], pixelsPerInch: null }
}
