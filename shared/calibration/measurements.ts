import type { ReadingChannel } from '../schemas/benches'
import type { Warning, zeros } from '../schemas/curves'
import { ComputeError } from '../errors'
import { densityFromReflectance, reflectanceFromDensity } from '../tone/density'
import { lightnessFromLuminance, luminanceFromLightness } from '../tone/lightness'
import type { ReadingUnit } from './measurement-columns'
import { findColumns } from './measurement-columns'
import { numberIn, readNamedTable } from './measurement-text'
import { requireUsable, warningsFor } from './measurement-checks'

export type Zero = typeof zeros[number]

/** Values as api.md's JSON body carries them. */
export interface MeasuredValues { unit: ReadingUnit, values: readonly { level: number, value: number, lab?: [number, number, number] | null }[] }

export interface MeasurementOptions {
  /** what a zero density (a full reflectance, L* 100) means; absent: absolute */
  zero?: Zero
  /** absolute L* of the paper that the instrument was nulled on; with `zero: 'paper'`, 95 when absent */
  paperLightness?: number
  /** the bench's reading channel; absent: lightness. In a density channel `lightness` is that density's L*. */
  channel?: ReadingChannel
}

export interface MeasuredPatch { level: number, lightness: number, lab: [number, number, number] | null }
export interface Measurements { unit: ReadingUnit, zero: Zero, paperLightness: number | null, patches: MeasuredPatch[], warnings: Warning[] }

/** L* of a bright paper, taken when the paper's own is not given. Common practice, no source. */
export const assumedPaperLightness = 95

/**
 * Measured patches as absolute print lightness: from a JSON body, or from text (CSV with a header, or CGATS text).
 * Order of rows does not matter and is kept. `zero: 'paper'` adds the paper's own density to densities (and multiplies
 * reflectances and luminances with the paper's).
 * @throws ComputeError `unparsable`, `invalid_input`, `too_few_levels`, `range_too_small` or `levels_unrelated`.
 */
export function readMeasurements(source: MeasuredValues | string, options: MeasurementOptions = {}): Measurements {
  const channel = options.channel ?? 'lightness'
  const warnings: Warning[] = []
  const measured = typeof source === 'string' ? valuesFromText(source, channel) : source
  const { values, unit } = inFractions(measured, warnings)
  const zero = options.zero ?? 'absolute'
  const paperLightness = zero === 'paper' ? options.paperLightness ?? assumedPaperLightness : options.paperLightness ?? null
  const paper = zero === 'paper' ? luminanceFromLightness(paperLightness!) : 1
  const patches = values.map(({ level, value, lab }, i) => ({ level, lightness: absoluteLightness(value, unit, paper, i), lab: lab ?? null }))
  requireUsable(patches, channel)
  warnings.push(...warningsFor(patches, { unit, zero: options.zero, paperGiven: options.paperLightness !== undefined }))
  return { unit, zero, paperLightness, patches, warnings }
}

function valuesFromText(text: string, channel: ReadingChannel): MeasuredValues {
  const table = readNamedTable(text)
  const columns = findColumns(table, channel)
  const values = table.rows.map((_, row) => ({
    level: numberIn(table, row, columns.level.index) * columns.level.scale,
    value: numberIn(table, row, columns.value.index) * columns.value.scale,
    lab: columns.lab && columns.lab.map(column => numberIn(table, row, column)) as [number, number, number],
  }))
  return { unit: columns.unit, values }
}

/** Levels and reflectances written in per cent become fractions, with a warning. */
function inFractions({ unit, values }: MeasuredValues, warnings: Warning[]): MeasuredValues {
  const levelsInPercent = values.some(v => v.level > 1.000001)
  const reflectancesInPercent = unit === 'reflectance' && values.some(v => v.value > 1.5)
  if (levelsInPercent) warnings.push({ code: 'levels_in_percent', message: 'Levels above 1 were found, so all levels were read as per cent of ink.' })
  if (reflectancesInPercent) warnings.push({ code: 'reflectance_in_percent', message: 'Reflectances above 1 were found, so all were read as per cent.' })
  return {
    unit,
    values: values.map((v, i) => ({ ...v, level: requireLevel(v.level * (levelsInPercent ? 0.01 : 1), i), value: v.value * (reflectancesInPercent ? 0.01 : 1) })),
  }
}

function requireLevel(level: number, i: number): number {
  if (level >= -1e-9 && level <= 1 + 1e-6) return Math.min(1, Math.max(0, level))
  throw outOfRange(i, 'level', 'Levels run from 0 (clear film) to 1 (full ink).')
}

/** Bounds of what an instrument can show: a little beyond black and white, for noise. */
const bounds: Record<ReadingUnit, [least: number, greatest: number]> = { lightness: [0, 105], density: [-0.2, 5], reflectance: [0, 1.2] }

function absoluteLightness(value: number, unit: ReadingUnit, paper: number, i: number): number {
  const [least, greatest] = bounds[unit]
  if (!(value >= least && value <= greatest)) throw outOfRange(i, 'value', `A ${unit} lies between ${least} and ${greatest}.`)
  const relative = unit === 'lightness' ? luminanceFromLightness(value) : unit === 'density' ? reflectanceFromDensity(value) : value
  if (paper === 1 && unit === 'lightness') return Math.min(100, value)
  return Math.min(100, lightnessFromLuminance(relative * paper))
}

const outOfRange = (i: number, field: string, message: string): ComputeError =>
  new ComputeError('invalid_input', `Row ${i + 1}: ${message}`, [{ path: `values.${i}.${field}`, message }])

/** Density of the paper that `zero: 'paper'` adds to each value. */
export const paperDensity = (paperLightness: number): number => densityFromReflectance(luminanceFromLightness(paperLightness))
