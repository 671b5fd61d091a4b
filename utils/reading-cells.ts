import { densityFromLightness } from '#shared/tone/density'
import type { Reading } from '#shared/schemas/curves'

export interface PatchRow { number: number, level: number, lightness: number | null, density: number | null, deviation: number | null, used: boolean }

/** Patches as rows, by rising ink; equal ink keeps the wedge's order, whose numbers begin at 1. */
export const patchRows = (patches: Reading['patches']): PatchRow[] => patches
  .map((patch, i) => ({
    number: i + 1, level: patch.level, lightness: patch.lightness, deviation: patch.deviation, used: patch.used,
    density: patch.lightness === null ? null : densityFromLightness(Math.max(0.1, patch.lightness)),
  }))
  .sort((a, b) => a.level - b.level || a.number - b.number)

/** One outline for all cells (x and y in turn) as the data of an SVG path. */
export const outlineOf = (cells: readonly (readonly number[])[]): string => cells.map(cell => `M${cell[0]} ${cell[1]}L${cell.slice(2).join(' ')}Z`).join('')

/** Crosses from corner to corner of these cells. */
export const crossesOf = (cells: readonly (readonly number[])[]): string => cells.map(c => `M${c[0]} ${c[1]}L${c[4]} ${c[5]}M${c[2]} ${c[3]}L${c[6]} ${c[7]}`).join('')

/** `381 of 384 cells read, 3 of them left out: too far from their like.` */
export function sayCells(patches: Reading['patches']): string {
  const read = patches.filter(patch => patch.lightness !== null).length
  const leftOut = patches.filter(patch => patch.lightness !== null && !patch.used).length
  const all = read === patches.length ? `All ${read} cells were read` : `${read} of ${patches.length} cells were read`
  return leftOut === 0 ? `${all}.` : `${all}; ${leftOut === 1 ? 'one is' : `${leftOut} are`} left out, because something disturbs ${leftOut === 1 ? 'it' : 'them'}.`
}
