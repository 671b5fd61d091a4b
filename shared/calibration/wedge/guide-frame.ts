import { wedgeGrids, type WedgeGrid } from '../wedge-layout'
import { layOutFrame } from './frame'
import type { Ground, PageLabel, RectMm, WedgePage } from './page'
import { cellSideMm } from './scattered-page'

/** What a guide has inside its frame. */
export interface GuideField { columns: number, rows: number, patches: RectMm[], grounds: Ground[], labels: PageLabel[] }

/** A page with the frame of the scattered wedge of this grid, and what `fill` lays into its field. */
export function guidePage(grid: WedgeGrid, fill: (field: RectMm) => GuideField): WedgePage {
  const { columns, rows } = wedgeGrids[grid]
  const frame = layOutFrame(columns * cellSideMm, rows * cellSideMm)
  const inside = fill(frame.field)
  return { ...frame, ...inside, kind: 'guide', labels: [...frame.labels, ...inside.labels], pixelsPerInch: null }
}
