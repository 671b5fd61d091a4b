import { parseDecimal } from './figures'

/** A column of a table that is filled in by hand. */
export interface FigureColumn<Key extends string = string> {
  key: Key
  name: string
  /** the figure, or null where the text is none */
  read?: (text: string) => number | null
  min: number
  max: number
  /** what to write instead, said when the text is no figure */
  example: string
  /** may stay empty in a row that has others */
  optional?: boolean
  /** holds words beside figures */
  isWide?: boolean
}
export type FigureRow<Key extends string = string> = Record<Key, string>
export interface FigureProblem { row: number, key: string, message: string }

/** Rows as figures; empty rows are passed over, a half-filled one is a problem that names its field. */
export function readFigureRows<Key extends string>(rows: readonly FigureRow<Key>[], columns: readonly FigureColumn<Key>[], /** a row with nothing in these counts as empty */ needs: readonly Key[]): { values: (Record<Key, number | null> & { row: number })[], problems: FigureProblem[] } {
  const problems: FigureProblem[] = []
  const values = rows.flatMap((texts, row) => {
    if (needs.every(key => texts[key].trim() === '')) return []
    const figures = Object.fromEntries(columns.map((column) => {
      const { figure, problem } = readField(texts[column.key], column)
      if (problem) problems.push({ row, key: column.key, message: problem })
      return [column.key, figure]
    })) as Record<Key, number | null>
    return [{ ...figures, row }]
  })
  const wrong = new Set(problems.map(problem => problem.row))
  return { values: values.filter(value => !wrong.has(value.row)), problems }
}

function readField(text: string, { read = parseDecimal, min, max, example, optional }: FigureColumn): { figure: number | null, problem?: string } {
  if (text.trim() === '') return { figure: null, problem: optional ? undefined : `Write a figure, such as ${example}.` }
  const figure = read(text)
  if (figure === null) return { figure, problem: `Write a figure, such as ${example}.` }
  return { figure, problem: figure < min || figure > max ? `From ${min} to ${max}.` : undefined }
}

/** Cells of what was copied out of a spreadsheet: rows by lines, columns by tabs or semicolons. */
export const pastedCells = (text: string): string[][] =>
  text.trim().split(/\r\n|\r|\n/).map(line => line.split(/[\t;]/).map(cell => cell.trim()))

/** The rows with a block of pasted cells laid in from one field on; rows are added as needed where they may. */
export function withPasted<Key extends string>(rows: readonly FigureRow<Key>[], keys: readonly Key[], row: number, key: Key, cells: readonly string[][], mayGrow: boolean): FigureRow<Key>[] {
  const from = keys.indexOf(key)
  const count = mayGrow ? Math.max(rows.length, row + cells.length) : rows.length
  return Array.from({ length: count }, (_, i) => {
    const texts = { ...(rows[i] ?? Object.fromEntries(keys.map(k => [k, '']))) } as FigureRow<Key>
    cells[i - row]?.forEach((cell, j) => {
      const target = keys[from + j]
      if (target) texts[target] = cell
    })
    return texts
  })
}
