import { parseDecimal } from './figures'
import type { TypedRow } from './read-pasted-table'

export interface TypedProblem { row: number, field: 'ink' | 'value', message: string }
export interface TypedValues {
  values: { level: number, value: number }[]
  problems: TypedProblem[]
  /** 100 when the levels are per cent, 1 when all of them lie within 0 to 1 */
  inkScale: 1 | 100
}

/** Rows with nothing in them are passed over; a half-filled row is a problem that names its field. */
export function readTypedRows(rows: readonly TypedRow[]): TypedValues {
  const inkScale = scaleOfLevels(rows)
  const result: TypedValues = { values: [], problems: [], inkScale }
  rows.forEach((typed, row) => {
    if (typed.ink.trim() === '' && typed.value.trim() === '') return
    const ink = readInk(typed.ink)
    const value = parseDecimal(typed.value)
    if (ink === null) result.problems.push({ row, field: 'ink', message: missing(typed.ink, 'the ink level') })
    else if (ink < 0 || ink > inkScale) result.problems.push({ row, field: 'ink', message: 'Ink lies between 0 and 100 %.' })
    if (value === null) result.problems.push({ row, field: 'value', message: missing(typed.value, 'the value') })
    if (ink !== null && value !== null && ink >= 0 && ink <= inkScale) result.values.push({ level: ink / inkScale, value })
  })
  return result
}

/** A per cent sign after an ink level is welcome and says nothing new. */
const readInk = (text: string) => parseDecimal(text.replace(/\s*%\s*$/, ''))

/** A table whose greatest level is 1 or less, with something between, is in fractions: 1 % as the most ink measures nothing. */
function scaleOfLevels(rows: readonly TypedRow[]): 1 | 100 {
  const levels = rows.map(row => readInk(row.ink)).filter(level => level !== null)
  return levels.length > 1 && Math.max(...levels) <= 1 ? 1 : 100
}

const missing = (text: string, what: string) => text.trim() === '' ? `Fill in ${what}.` : `“${text.trim()}” is not a number.`

/** Rows for an even wedge of `steps` patches, ink in per cent from clear film to full ink. */
export function evenRows(steps: number): TypedRow[] {
  return Array.from({ length: steps }, (_, i) => ({ ink: String(Math.round(i / (steps - 1) * 1e4) / 100), value: '' }))
}
