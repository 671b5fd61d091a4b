import type { DiagnosticPlaces } from '#shared/calibration/causes'
import type { WedgeChart } from '#shared/calibration/wedge/chart'
import { centreOf } from '#shared/calibration/wedge/page'
import type { ReadingEvidence } from '#shared/schemas/curves'
import type { StoredPatch } from '../db/schema/readings'
import type { PlacedPatch } from '../image/protocol'

/** The readable patches of a wedge with what stands in them and where: mm from the field's middle, and −1 … 1 across it. */
export function placedPatches({ page: { field, patches: places }, patches: contents }: WedgeChart, patches: readonly StoredPatch[]): (PlacedPatch & { inkColor?: string })[] {
  const [middleX, middleY] = centreOf(field)
  return patches.flatMap(({ lightness, deviation, used }, i) => {
    if (!used || lightness === null || !contents[i]) return []
    const [x, y] = centreOf(places[i]!)
    const [xMm, yMm] = [x - middleX, y - middleY]
    const { level, tone, inkColor } = contents[i]
    return [{ level, lightness, deviation, xMm, yMm, x: 2 * xMm / field.widthMm, y: 2 * yMm / field.heightMm, ...tone === undefined ? {} : { tone }, ...inkColor ? { inkColor } : {} }]
  })
}

/** L* beside and under the film; clear film and full ink are the mean of the references. */
export function diagnosticPlaces({ references, diagnostics }: ReadingEvidence): DiagnosticPlaces {
  const mean = (which: 'clear' | 'fullInk'): number | null => {
    const read = references.flatMap(reference => reference[which]?.lightness ?? [])
    return read.length > 0 ? read.reduce((sum, l) => sum + l, 0) / read.length : null
  }
  const { foil, bare, uncoated } = diagnostics
  return { foil: foil?.lightness ?? null, bare: bare?.lightness ?? null, uncoated: uncoated?.lightness ?? null, clear: mean('clear'), fullInk: mean('fullInk') }
}
