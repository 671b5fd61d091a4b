import { buildLevelTable, filmCodes, inkChannels } from '#shared/tone/levels'
import type { FilmOrder } from '../protocol'
import type { ToneRows } from '../sample/tone-rows'
import type { FilmLayout } from './layout'
import type { Mark } from './marks'

/** Black ink is one grey channel; another colour three, red, green, blue. */
export type FilmChannels = 1 | 3

export interface FilmInk {
  channels: FilmChannels
  /** film code of each tone code, a table a channel */
  tables: Uint16Array[]
  /** film codes of no ink and of all the ink */
  clear: number[]
  full: number[]
}

export function filmInk({ tone, inkColor }: Pick<FilmOrder, 'tone' | 'inkColor'>): FilmInk {
  const levels = buildLevelTable(tone)
  const channels = channelsOf([inkColor])
  const parts = inkParts(inkColor, channels)
  return { channels, tables: parts.map(part => filmCodes(levels, part)), clear: codesAt(0, parts), full: codesAt(1, parts) }
}

/** As few channels as hold all the inks of a film. */
export const channelsOf = (inkColors: string[]): FilmChannels => inkColors.every(color => inkChannels(color).every(part => part === 0)) ? 1 : 3

/** What an ink leaves in each of the film's channels, 0 … 255. */
export const inkParts = (inkColor: string, channels: FilmChannels): number[] => channels === 1 ? [0] : inkChannels(inkColor)

/** Film codes of one ink level, a channel each. */
export const codesAt = (level: number, parts: number[]): number[] => parts.map(part => filmCodes(Float64Array.of(level), part)[0]!)

/** Rows of interleaved 16-bit film codes as they lie on the film. The row is the same array each time. */
export type FilmRows = Generator<Uint16Array, void, void>

/** The picture through its table, with margins and marks around it; the whole film mirrored last. */
export function* composeFilm(tones: ToneRows, ink: FilmInk, layout: FilmLayout, marks: Mark[], order: Pick<FilmOrder, 'margin' | 'mirror'>): FilmRows {
  const { channels } = ink
  const { picture } = layout
  const [fill, stroke] = order.margin.kind === 'clear' ? [ink.clear, ink.full] : [ink.full, ink.clear]
  const empty = new Uint16Array(layout.width * channels)
  for (let i = 0; i < empty.length; i++) empty[i] = fill[i % channels]!
  const row = new Uint16Array(empty.length)
  for (let y = 0; y < layout.height; y++) {
    row.set(empty)
    if (y >= picture.y && y < picture.y + picture.height) {
      const next = tones.next()
      if (next.done) throw new Error(`the picture ended before line ${y} of the film`)
      throughTables(next.value, ink, row, picture.x)
    }
    for (const mark of marks) drawMark(mark, y, row, layout.width, fill, stroke)
    if (order.mirror) mirrorRow(row, channels)
    yield row
  }
}

function throughTables(tones: Uint16Array, { channels, tables }: FilmInk, row: Uint16Array, x: number): void {
  tables.forEach((table, channel) => {
    for (let i = 0, at = x * channels + channel; i < tones.length; i++, at += channels) row[at] = table[tones[i]!]!
  })
}

function drawMark(mark: Mark, y: number, row: Uint16Array, width: number, fill: number[], stroke: number[]): void {
  if (y < mark.y || y >= mark.y + mark.height) return
  const channels = fill.length
  const line = (y - mark.y) * mark.width
  for (let i = Math.max(0, -mark.x); i < mark.width && mark.x + i < width; i++) {
    const share = mark.coverage ? mark.coverage[line + i]! / 255 : 1
    if (share === 0) continue
    for (let c = 0; c < channels; c++) row[(mark.x + i) * channels + c] = Math.round(fill[c]! + share * (stroke[c]! - fill[c]!))
  }
}

/** Left becomes right, channels keep their order. */
export function mirrorRow(row: Uint16Array, channels: FilmChannels): void {
  row.reverse()
  if (channels === 1) return
  for (let at = 0; at < row.length; at += 3) [row[at], row[at + 2]] = [row[at + 2]!, row[at]!]
}
