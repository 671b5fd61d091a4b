import type { readingUnits } from '#shared/schemas/curves'
import { parseDecimal } from './figures'

export interface TypedRow { ink: string, value: string }
export interface PastedTable {
  rows: TypedRow[]
  /** what a header line said the values are */
  unit: typeof readingUnits[number] | null
  /** true when one column came: values for levels that stand already */
  valuesOnly: boolean
  /** lines that could not be split into two numbers, as they were */
  unread: string[]
}

const unitNames: Record<string, PastedTable['unit']> = {
  'lightness': 'lightness', 'l': 'lightness', 'l*': 'lightness', 'lab_l': 'lightness',
  'density': 'density', 'd': 'density', 'd_vis': 'density', 'reflectance': 'reflectance', 'r': 'reflectance',
}

/**
 * Reads what comes out of a spreadsheet or a text file: a row a line, ink level first and value second, or one column
 * of values. Tabs, semicolons, spaces or commas divide; a comma inside a number is a decimal comma.
 */
export function readPastedTable(text: string): PastedTable {
  const lines = text.split(/\r\n|\r|\n/).map(line => line.trim()).filter(line => line !== '')
  const table: PastedTable = { rows: [], unit: null, valuesOnly: false, unread: [] }
  const cellRows = isOneColumn(lines) ? lines.map(line => [line]) : lines.map(splitCells)
  const unitOfHeader = cellRows[0] && headerUnit(cellRows[0])
  if (unitOfHeader !== undefined) {
    table.unit = unitOfHeader
    cellRows.shift()
    lines.shift()
  }
  table.valuesOnly = cellRows.length > 0 && cellRows.every(cells => cells.length === 1)
  cellRows.forEach((cells, i) => {
    const numbers = cells.map(parseDecimal)
    if (table.valuesOnly && numbers[0] !== null) table.rows.push({ ink: '', value: cells[0]! })
    else if (numbers.length >= 2 && numbers[0] !== null && numbers[1] !== null) table.rows.push({ ink: cells[0]!, value: cells[1]! })
    else table.unread.push(lines[i]!)
  })
  return table
}

/**
 * Every line is one number. `0,22` could be two: lines that all hold a comma are taken as level and value when their first
 * parts are all different, as levels are, and one of them is 0, the clear film that every wedge has.
 */
function isOneColumn(lines: string[]): boolean {
  if (!lines.every(line => !/\s/.test(line) && parseDecimal(line) !== null)) return false
  if (!lines.every(line => line.includes(','))) return true
  const firstParts = lines.map(line => Number(line.split(',')[0]))
  return !firstParts.includes(0) || new Set(firstParts).size < lines.length
}

function headerUnit(cells: string[]): PastedTable['unit'] | undefined {
  if (cells.some(cell => parseDecimal(cell) !== null)) return undefined
  return cells.map(cell => unitNames[cell.toLowerCase()]).find(unit => unit) ?? null
}

function splitCells(line: string): string[] {
  const divider = [/\t/, /;/, /\s+/].find(d => d.test(line))
  const cells = divider ? line.split(divider) : splitAtCommas(line)
  return cells.map(cell => cell.trim().replace(/^"(.*)"$/, '$1').replace(/^,|,$/g, '')).filter(cell => cell !== '')
}

/** `0.5,83` has one comma between two numbers; `0,5,83,2` is two numbers with decimal commas. */
function splitAtCommas(line: string): string[] {
  const parts = line.split(',')
  return parts.length === 4 && parts.every(p => /^-?\d+$/.test(p.trim())) ? [`${parts[0]},${parts[1]}`, `${parts[2]},${parts[3]}`] : parts
}
