import Papa from 'papaparse'
import { valueAt } from '#shared/tone/response'
import type { StudioAccess } from './access'
import { curveOf } from './curves'

export const tableFormats = { csv: 'text/csv; charset=utf-8', json: 'application/json', cgats: 'text/plain; charset=utf-8' } as const
export type TableFormat = keyof typeof tableFormats

/** One row a tone: wanted tone, ink level with its band, and the print lightness L* that this level gives. */
interface Row { tone: number, level: number, levelLow: number, levelHigh: number, lightness: number }

/** The curve as named rows in an open format. */
export async function curveTable(studio: StudioAccess, curveId: string, format: TableFormat): Promise<{ fileName: string, text: string }> {
  const curve = await curveOf(studio, curveId)
  const rows = curve.points.map(point => ({ ...point, lightness: valueAt(curve.response, point.level) }))
  const fileName = `curve-${curve.version}-${curve.id.slice(-8)}.${format === 'cgats' ? 'txt' : format}`
  return { fileName, text: writers[format](rows, curve) }
}

type Facts = Awaited<ReturnType<typeof curveOf>>
const writers: Record<TableFormat, (rows: Row[], curve: Facts) => string> = {
  csv: rows => Papa.unparse(rows, { newline: '\n', escapeFormulae: false }) + '\n',
  json: (rows, { id, benchId, version, state, aim, calibrated }) => JSON.stringify({ id, benchId, version, state, aim, calibrated, rows }),
  cgats: cgatsText,
}

/** CGATS text as in ISO 28178: keywords, then the names of the fields, then the data; fields of our own are declared first. */
function cgatsText(rows: Row[], { id, createdAt, aim, version }: Facts): string {
  const fields = { SAMPLE_ID: (_: Row, i: number) => i + 1, TONE: (r: Row) => r.tone, LEVEL: (r: Row) => r.level, LEVEL_LOW: (r: Row) => r.levelLow, LEVEL_HIGH: (r: Row) => r.levelHigh, LAB_L: (r: Row) => r.lightness }
  const names = Object.keys(fields)
  return [
    'CGATS.17', 'ORIGINATOR "Emulside"', `DESCRIPTOR "Curve ${id}, version ${version}, ${aim}"`, `CREATED "${createdAt}"`,
    ...['TONE', 'LEVEL', 'LEVEL_LOW', 'LEVEL_HIGH'].map(name => `KEYWORD "${name}"`),
    `NUMBER_OF_FIELDS ${names.length}`, 'BEGIN_DATA_FORMAT', names.join(' '), 'END_DATA_FORMAT',
    `NUMBER_OF_SETS ${rows.length}`, 'BEGIN_DATA', ...rows.map((row, i) => Object.values(fields).map(valueOf => valueOf(row, i)).join(' ')), 'END_DATA', '',
  ].join('\n')
}
