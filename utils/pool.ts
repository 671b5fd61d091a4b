import type { Reading } from '#shared/schemas/curves'
import type { WedgeBrief, WedgeKind } from '#shared/schemas/wedges'
import { measuredPoints } from './curve-chart'
import { markOf, type MarkShape, type PlotDots } from './plot-chart'

export type PoolReading = Pick<Reading, 'id' | 'state' | 'quality' | 'wedgeId' | 'wedgePrintId' | 'printNumber' | 'createdAt' | 'patches' | 'warnings' | 'unit' | 'zero' | 'progress' | 'error' | 'evidence'>

export type PoolWedge = Pick<WedgeBrief, 'id' | 'kind' | 'code'>

/** What counts as one sample: all scans of one wedge print, or one set of measured values. Phone readings of a print stand by themselves. */
export interface PoolEntry {
  key: string
  isPhone: boolean
  /** the cells of a scattered wedge tell uneven coating from tone; other values are points only. The two are fitted in different ways, never together */
  isScattered: boolean
  printNumber: number | null
  /** the film’s code, which stands on the print, too; null for values without a film */
  code: string | null
  /** newest first */
  readings: PoolReading[]
  mark: MarkShape
}

/** Guides of other steps are read, too, but make no curve. */
const curveKinds: readonly WedgeKind[] = ['scattered', 'numbered']

/** A bench's readings by wedge print, in the order given; those of guides are left out. Each entry keeps its shape whatever is chosen. */
export function poolEntries(all: readonly PoolReading[], wedges: readonly PoolWedge[] = []): PoolEntry[] {
  const wedgeOf = (reading: PoolReading) => wedges.find(wedge => wedge.id === reading.wedgeId)
  const kindOf = (reading: PoolReading) => wedgeOf(reading)?.kind
  const readings = all.filter(reading => reading.wedgeId === null || curveKinds.includes(kindOf(reading) ?? 'scattered'))
  const entries = new Map<string, PoolEntry>()
  // From the oldest on, so that a new print takes the next shape and leaves the others theirs.
  for (const reading of [...readings].reverse()) {
    const isPhone = reading.quality === 'phone'
    const key = `${reading.wedgePrintId ?? reading.id}${isPhone ? ':phone' : ''}`
    const entry = entries.get(key)
    if (entry) entry.readings.unshift(reading)
    else entries.set(key, { key, isPhone, isScattered: reading.wedgeId !== null && kindOf(reading) !== 'numbered', printNumber: reading.printNumber, code: wedgeOf(reading)?.code ?? null, readings: [reading], mark: markOf(entries.size) })
  }
  return [...entries.values()].reverse()
}

export const readyIds = (entry: PoolEntry): string[] => entry.readings.filter(reading => reading.state === 'ready').map(reading => reading.id)

/** What goes into a curve unless somebody says otherwise: scattered wedges before other values, phone readings only where there is nothing else. */
export function defaultPool(entries: readonly PoolEntry[]): string[] {
  const groups = [false, true].flatMap(isPhone => [true, false].map(isScattered => entries.filter(entry => entry.isPhone === isPhone && entry.isScattered === isScattered).flatMap(readyIds)))
  return groups.find(ids => ids.length > 0) ?? []
}

export const isChosen = (entry: PoolEntry, chosen: readonly string[]): boolean => readyIds(entry).some(id => chosen.includes(id))

/** The pool with a whole entry taken in or left out; entries of the other kind make room for it. */
export function withEntry(chosen: readonly string[], entry: PoolEntry, isIn: boolean, entries: readonly PoolEntry[]): string[] {
  const leaves = isIn ? entries.filter(other => other.isScattered !== entry.isScattered || other === entry) : [entry]
  const others = chosen.filter(id => !leaves.some(other => other.readings.some(reading => reading.id === id)))
  return isIn ? [...others, ...readyIds(entry)] : others
}

/** How many samples a choice of readings makes. */
export const countPrints = (entries: readonly PoolEntry[], chosen: readonly string[]): number => entries.filter(entry => isChosen(entry, chosen)).length

/** The patches of each entry that a curve was fitted from, in the entry's shape. */
export const poolDots = (entries: readonly PoolEntry[], readingIds: readonly string[], valueOf?: Parameters<typeof measuredPoints>[1]): PlotDots[] =>
  entries.map(entry => ({ mark: entry.mark, points: measuredPoints(entry.readings.filter(reading => readingIds.includes(reading.id)), valueOf) })).filter(dots => dots.points.length > 0)

const unitNames = { lightness: 'L*', density: 'density', reflectance: 'reflectance' } as const

/** `381 of 384 patches, L* 22.4 to 94.9, measured as density above paper`. */
export function readingText({ patches, unit, zero }: PoolReading, write: (value: number) => string): string {
  const lightness = patches.flatMap(patch => patch.lightness === null ? [] : [patch.lightness])
  const count = lightness.length === patches.length ? `${patches.length}` : `${lightness.length} of ${patches.length}`
  const range = lightness.length ? `L* ${write(Math.min(...lightness))} to ${write(Math.max(...lightness))}` : ''
  const how = unit ? `measured as ${unitNames[unit]}${zero === 'paper' ? ' above paper' : ''}` : ''
  return [`${count} ${patches.length === 1 ? 'patch' : 'patches'}`, range, how].filter(Boolean).join(', ')
}
