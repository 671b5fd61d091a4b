import type { Reading } from '#shared/schemas/curves'
import { measuredPoints } from './curve-chart'
import { markOf, type MarkShape, type PlotDots } from './plot-chart'

export type PoolReading = Pick<Reading, 'id' | 'state' | 'quality' | 'wedgePrintId' | 'printNumber' | 'createdAt' | 'patches' | 'warnings' | 'unit' | 'zero' | 'progress' | 'error' | 'evidence'>

/** What counts as one sample: all scans of one wedge print, or one set of measured values. Phone readings of a print stand by themselves. */
export interface PoolEntry {
  key: string
  isPhone: boolean
  printNumber: number | null
  /** newest first */
  readings: PoolReading[]
  mark: MarkShape
}

/** A bench's readings by wedge print, in the order given. Each entry keeps its shape whatever is chosen. */
export function poolEntries(readings: readonly PoolReading[]): PoolEntry[] {
  const entries = new Map<string, PoolEntry>()
  // From the oldest on, so that a new print takes the next shape and leaves the others theirs.
  for (const reading of [...readings].reverse()) {
    const isPhone = reading.quality === 'phone'
    const key = `${reading.wedgePrintId ?? reading.id}${isPhone ? ':phone' : ''}`
    const entry = entries.get(key)
    if (entry) entry.readings.unshift(reading)
    else entries.set(key, { key, isPhone, printNumber: reading.printNumber, readings: [reading], mark: markOf(entries.size) })
  }
  return [...entries.values()].reverse()
}

export const readyIds = (entry: PoolEntry): string[] => entry.readings.filter(reading => reading.state === 'ready').map(reading => reading.id)

/** What goes into a curve unless somebody says otherwise: all that is read; phone readings only where there is nothing else. */
export function defaultPool(entries: readonly PoolEntry[]): string[] {
  const better = entries.filter(entry => !entry.isPhone).flatMap(readyIds)
  return better.length > 0 ? better : entries.flatMap(readyIds)
}

export const isChosen = (entry: PoolEntry, chosen: readonly string[]): boolean => readyIds(entry).some(id => chosen.includes(id))

/** The pool with a whole entry taken in or left out. */
export function withEntry(chosen: readonly string[], entry: PoolEntry, isIn: boolean): string[] {
  const others = chosen.filter(id => !entry.readings.some(reading => reading.id === id))
  return isIn ? [...others, ...readyIds(entry)] : others
}

/** How many samples a choice of readings makes. */
export const countPrints = (entries: readonly PoolEntry[], chosen: readonly string[]): number => entries.filter(entry => isChosen(entry, chosen)).length

/** The patches of each entry that a curve was fitted from, in the entry's shape. */
export const poolDots = (entries: readonly PoolEntry[], readingIds: readonly string[]): PlotDots[] =>
  entries.map(entry => ({ mark: entry.mark, points: measuredPoints(entry.readings.filter(reading => readingIds.includes(reading.id))) })).filter(dots => dots.points.length > 0)

const unitNames = { lightness: 'L*', density: 'density', reflectance: 'reflectance' } as const

/** `381 of 384 patches, L* 22.4 to 94.9, measured as density above paper`. */
export function readingText({ patches, unit, zero }: PoolReading, write: (value: number) => string): string {
  const lightness = patches.flatMap(patch => patch.lightness === null ? [] : [patch.lightness])
  const count = lightness.length === patches.length ? `${patches.length}` : `${lightness.length} of ${patches.length}`
  const range = lightness.length ? `L* ${write(Math.min(...lightness))} to ${write(Math.max(...lightness))}` : ''
  const how = unit ? `measured as ${unitNames[unit]}${zero === 'paper' ? ' above paper' : ''}` : ''
  return [`${count} ${patches.length === 1 ? 'patch' : 'patches'}`, range, how].filter(Boolean).join(', ')
}
