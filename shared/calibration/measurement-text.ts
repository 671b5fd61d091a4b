import Papa from 'papaparse'
import { ComputeError } from '../errors'

/** A table of named columns, as text; every row has one cell for each column. */
export interface NamedTable { columns: string[], rows: string[][], decimalComma: boolean }

/** Longest text that is looked at; a wedge of thousands of patches is far smaller. */
const longestText = 5_000_000

/**
 * Reads measured values from text: CGATS text (ISO 28178) where a line says BEGIN_DATA, else CSV with a header line.
 * CSV columns are parted by semicolons, tabs or commas; with the first two a decimal comma is taken.
 * @throws ComputeError `unparsable` with a sentence on what was missing.
 */
export function readNamedTable(text: string): NamedTable {
  if (text.length > longestText) throw new ComputeError('unparsable', 'This text is too long for measured values.')
  const plain = text.replace(/^\uFEFF/, '')
  return /^\s*BEGIN_DATA\s*$/m.test(plain) ? readCgats(plain) : readCsv(plain)
}

function readCsv(text: string): NamedTable {
  const header = text.split(/\r?\n|\r/).find(line => line.trim() !== '') ?? ''
  const delimiter = [';', '\t'].find(mark => header.includes(mark)) ?? ','
  const { data, errors } = Papa.parse<string[]>(text, { delimiter, skipEmptyLines: 'greedy' })
  const [columns, ...rows] = data.map(row => row.map(cell => cell.trim()))
  if (!columns || rows.length === 0) throw new ComputeError('unparsable', 'There are no values here. Write a header line such as level,lightness and then one row a patch.')
  if (errors.length > 0) throw new ComputeError('unparsable', `Row ${(errors[0]!.row ?? 0) + 1} cannot be read: ${errors[0]!.message}.`)
  const uneven = rows.findIndex(row => row.length !== columns.length)
  if (uneven >= 0) {
    const hint = delimiter === ',' && rows[uneven]!.length > columns.length ? ' Where decimals have commas, part the columns with semicolons.' : ''
    throw new ComputeError('unparsable', `Row ${uneven + 2} has ${rows[uneven]!.length} values, the header ${columns.length}.${hint}`)
  }
  return { columns, rows, decimalComma: delimiter !== ',' }
}

function readCgats(text: string): NamedTable {
  const columns = cgatsSection(text, 'BEGIN_DATA_FORMAT', 'END_DATA_FORMAT')
  const cells = cgatsSection(text, 'BEGIN_DATA', 'END_DATA')
  if (columns.length === 0 || cells.length === 0) throw new ComputeError('unparsable', 'This CGATS text has no data format or no data.')
  if (cells.length % columns.length !== 0) throw new ComputeError('unparsable', `The data do not come in rows of ${columns.length} fields.`)
  const rows = Array.from({ length: cells.length / columns.length }, (_, row) => cells.slice(row * columns.length, (row + 1) * columns.length))
  return { columns, rows, decimalComma: true }
}

/** The tokens between two lines; comments (#) and quotes are ISO 28178's. */
function cgatsSection(text: string, from: string, to: string): string[] {
  const lines = text.split(/\r?\n|\r/)
  const start = lines.findIndex(line => line.trim() === from)
  const length = lines.slice(start + 1).findIndex(line => line.trim() === to)
  if (start < 0 || length < 0) throw new ComputeError('unparsable', `This CGATS text has no ${from} … ${to}.`)
  const section = lines.slice(start + 1, start + 1 + length).join('\n')
  return [...section.matchAll(/"([^"]*)"|#[^\n]*|([^\s"#]+)/g)].flatMap(match => match[1] ?? match[2] ?? [])
}

/**
 * A cell as a finite number; a decimal comma counts where the table allows it.
 * @throws ComputeError `unparsable` naming row and column.
 */
export function numberIn(table: NamedTable, row: number, column: number): number {
  const cell = table.rows[row]![column]!
  const written = table.decimalComma ? cell.replace(',', '.') : cell
  if (/^[-+]?(?:\d+\.?\d*|\.\d+)(?:e[-+]?\d+)?$/i.test(written)) return Number(written)
  throw new ComputeError('unparsable', `"${cell.slice(0, 40)}" in row ${row + 1}, column ${table.columns[column]!.slice(0, 40)}, is not a number.`)
}
