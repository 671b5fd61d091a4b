import type { ReadingChannel } from '../schemas/benches'
import type { readingUnits } from '../schemas/curves'
import { ComputeError } from '../errors'
import type { NamedTable } from './measurement-text'

export type ReadingUnit = typeof readingUnits[number]

/** Where a value stands in a table and what its number is to be multiplied with. */
interface Column { index: number, scale: number }
export interface MeasurementColumns { level: Column, value: Column, unit: ReadingUnit, lab: [number, number, number] | null }

interface Meaning { scale: number, unit: ReadingUnit }

/** Column names by what they hold; compared without case, spaces, underscores and signs. */
const levelNames: Record<string, number> = { level: 1, inklevel: 1, levelpercent: 0.01, inkpercent: 0.01, percent: 0.01, ink: 0.01, cmykk: 0.01, k: 0.01 }
const valueNames: Record<string, Meaning> = {
  lightness: { unit: 'lightness', scale: 1 }, l: { unit: 'lightness', scale: 1 }, labl: { unit: 'lightness', scale: 1 },
  density: { unit: 'density', scale: 1 }, d: { unit: 'density', scale: 1 }, dvis: { unit: 'density', scale: 1 },
  reflectance: { unit: 'reflectance', scale: 1 }, reflectancepercent: { unit: 'reflectance', scale: 0.01 }, xyzy: { unit: 'reflectance', scale: 0.01 },
}
/** Density through a filter (ISO 28178 names), for benches read in that channel. */
const channelNames: Partial<Record<ReadingChannel, string>> = { 'density-blue': 'dblue', 'density-green': 'dgreen', 'density-red': 'dred' }

/**
 * Finds the level and the value to read for a channel: the channel's own density, else L*, density or reflectance.
 * @throws ComputeError `unparsable` when either is missing.
 */
export function findColumns({ columns }: NamedTable, channel: ReadingChannel): MeasurementColumns {
  const names = columns.map(name => name.toLowerCase().replace(/[^a-z]/g, ''))
  const levelName = Object.keys(levelNames).find(name => names.includes(name))
  if (!levelName) throw new ComputeError('unparsable', 'No column holds the ink level. Name one level (0 to 1) or level_percent.')
  const own = channelNames[channel]
  const valueName = [...(own ? [own] : []), ...Object.keys(valueNames)].find(name => names.includes(name))
  if (!valueName) throw new ComputeError('unparsable', 'No column holds a measured value. Name one lightness, density or reflectance.')
  const meaning = valueNames[valueName] ?? { unit: 'density', scale: 1 }
  const lab = ['labl', 'laba', 'labb'].map(name => names.indexOf(name)) as [number, number, number]
  return {
    level: { index: names.indexOf(levelName), scale: levelNames[levelName]! },
    value: { index: names.indexOf(valueName), scale: meaning.scale },
    unit: meaning.unit,
    lab: lab.includes(-1) ? null : lab,
  }
}
