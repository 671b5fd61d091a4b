import type { TriptychState } from '../../utils/triptych'
import type { PreviewOrder, Reading, Summary } from './engine'

/** The whole picture, or a part of it at the film's own pixels. Figures always come from the whole. */
export type PreviewPart = 'whole' | 'detail'

/** Page to worker. */
export type PreviewRequest =
  | { kind: 'canvas', state: TriptychState, canvas: OffscreenCanvas }
  | { kind: 'source', part: PreviewPart, channels: ArrayBuffer, width: number, height: number }
  | { kind: 'show', part: PreviewPart }
  | { kind: 'order', order: PreviewOrder }
  | { kind: 'read', spot: { x: number, y: number } | null }

/** Worker to page. */
export type PreviewAnswer =
  | { kind: 'drawn', summary: Summary, pictureEnds: [low: number, high: number] }
  | { kind: 'reading', reading: Reading | null }
