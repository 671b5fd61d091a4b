import Papa from 'papaparse'
import type { ReadingChannel } from '#shared/schemas/benches'
import type { Curve } from '#shared/schemas/curves'
import { densityFromLightness } from '#shared/tone/density'
import { valueAt } from '#shared/tone/response'
import { db } from '../db/client'
import type { StudioAccess } from './access'
import { findBench } from './benches'
import { curveOf } from './curves'
import { requireFound } from './revisions'

export const tableFormats = { csv: 'text/csv; charset=utf-8', json: 'application/json', cgats: 'text/plain; charset=utf-8' } as const
export type TableFormat = keyof typeof tableFormats

/** One row a tone: wanted tone, ink level with its band, what this level prints as (L*, absolute density), and the level in per cent. */
interface Row { tone: number, level: number, levelLow: number, levelHigh: number, lightness: number, density: number, ink_percent: number }
/** In a density channel lightness and density are that channel's; its name in CGATS text. */
const densityFields = { 'lightness': 'D_VIS', 'colour-path': 'D_VIS', 'density-red': 'D_RED', 'density-green': 'D_GREEN', 'density-blue': 'D_BLUE' } as const

/** The curve as named rows in an open format. */
export async function curveTable(studio: StudioAccess, curveId: string, format: TableFormat): Promise<{ fileName: string, text: string }> {
  const curve = await curveOf(studio, curveId)
  const { readingChannel } = requireFound(await findBench(db(), studio.id, curve.benchId))
  const rows = curve.points.map((point): Row => {
    const lightness = lightnessAt(curve, readingChannel, point.level)
    return { ...point, lightness, density: densityFromLightness(Math.max(lightness, leastLightness)), ink_percent: 100 * point.level }
  })
  const fileName = `curve-${curve.version}-${curve.id.slice(-8)}.${format === 'cgats' ? 'txt' : format}`
  return { fileName, text: writers[format](rows, { ...curve, densityField: densityFields[readingChannel] }) }
}

/** Density 5, beyond what any print has. */
const leastLightness = 0.01

/** Along a colour path the response counts per cent of the path; lightness is the path's own there, from full ink to clear film. */
function lightnessAt({ response, colourPath }: Curve, channel: ReadingChannel, level: number): number {
  return channel === 'colour-path' && colourPath ? valueAt(colourPath.map(([l]) => l), 1 - level) : valueAt(response, level)
}

type Facts = Curve & { densityField: string }
const writers: Record<TableFormat, (rows: Row[], curve: Facts) => string> = {
  csv: rows => Papa.unparse(rows, { newline: '\n', escapeFormulae: false }) + '\n',
  json: (rows, { id, benchId, version, state, aim, calibrated }) => JSON.stringify({ id, benchId, version, state, aim, calibrated, rows }),
  cgats: cgatsText,
}

/** CGATS text as in ISO 28178: keywords, then the names of the fields, then the data; fields of our own are declared first. */
function cgatsText(rows: Row[], { id, createdAt, aim, version, densityField }: Facts): string {
  const fields = { SAMPLE_ID: (_: Row, i: number) => i + 1, TONE: (r: Row) => r.tone, LEVEL: (r: Row) => r.level, LEVEL_LOW: (r: Row) => r.levelLow, LEVEL_HIGH: (r: Row) => r.levelHigh, LAB_L: (r: Row) => r.lightness, [densityField]: (r: Row) => r.density, INK_PERCENT: (r: Row) => r.ink_percent }
  const names = Object.keys(fields)
  return [
    'CGATS.17', 'ORIGINATOR "Emulside"', `DESCRIPTOR "Curve ${id}, version ${version}, ${aim}"`, `CREATED "${createdAt}"`,
    ...['TONE', 'LEVEL', 'LEVEL_LOW', 'LEVEL_HIGH', 'INK_PERCENT'].map(name => `KEYWORD "${name}"`),
    `NUMBER_OF_FIELDS ${names.length}`, 'BEGIN_DATA_FORMAT', names.join(' '), 'END_DATA_FORMAT',
    `NUMBER_OF_SETS ${rows.length}`, 'BEGIN_DATA', ...rows.map((row, i) => Object.values(fields).map(valueOf => valueOf(row, i)).join(' ')), 'END_DATA', '',
  ].join('\n')
}
