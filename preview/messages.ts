import type { TriptychState } from '../utils/triptych'
import type { PreviewOrder, Reading, Summary } from './engine'

/** Page to worker. */
export type PreviewRequest =
  | { kind: 'canvas', state: TriptychState, canvas: OffscreenCanvas }
  | { kind: 'source', channels: ArrayBuffer, width: number, height: number }
  | { kind: 'order', order: PreviewOrder }
  | { kind: 'read', spot: { x: number, y: number } | null }

/** Worker to page. */
export type PreviewAnswer =
  | { kind: 'drawn', summary: Summary, pictureEnds: [low: number, high: number] }
  | { kind: 'reading', reading: Reading | null }
