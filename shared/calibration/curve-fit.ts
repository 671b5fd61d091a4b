import type { ReadingChannel } from '../schemas/benches'
import type { Curve, Warning } from '../schemas/curves'
import { ComputeError } from '../errors'
import type { LabPoint } from '../tone/looks'
import { channelValue } from './channel-values'
import type { ColourPath } from './colour-path'
import { colourPathOf, leastPathPatches } from './colour-path'
import { curveWarnings } from './curve-warnings'
import { fitResponse } from './response-fit'
import { reversalWarning } from './reversal'
import { fitWedge } from './wedge-fit'
import type { WedgeGrid } from './wedge-layout'
import { cellPlacesOf } from './wedge-layout'
import type { WedgePatch, WedgePrint } from './wedge-print'

/** A place beside the patches, and its lightness where it was read. */
export interface PlaceLightness { bare: number | null, foil: number | null, uncoated: number | null }

/** One reading that a curve is fitted from. */
export interface CurveReading {
  /** readings of the same print have the same */
  print: string
  quality: 'scan' | 'phone' | 'measured'
  /** of a scattered wedge: its cells stand row by row as its patches do; null where the places are not known */
  grid: WedgeGrid | null
  patches: readonly { level: number, lightness: number | null, lab: readonly number[] | null, used: boolean }[]
  places: PlaceLightness | null
  /** the wedge was printed by another path, or in another ink, than the bench's */
  isOtherPath: boolean
}

/** What a curve keeps of its fit; values are of the bench's reading channel, 0 … 100, at 1025 equal steps of ink level. */
export interface CurveFit {
  response: number[]
  low: number[]
  high: number[]
  lowOfAll: number[] | null
  highOfAll: number[] | null
  expectedError: NonNullable<Curve['expectedError']>
  basis: NonNullable<Curve['basis']>
  /** L*, a*, b* from paper to deepest tone; null without colours */
  colourPath: [number, number, number][] | null
  warnings: Warning[]
}

/**
 * A curve's response from readings of one bench, in its reading channel.
 *
 * Readings of one print are one sample: its patches are averaged cell by cell. Scattered wedges are fitted with their places
 * (`fitWedge`); numbered wedges and typed values, whose places say nothing, as points (`fitResponse`). The two kinds are never
 * mixed. The order of readings and patches does not matter.
 * @throws ComputeError `reading_unfit` for a mixture or a missing colour, and as the two fits do.
 */
export function fitCurve(readings: readonly CurveReading[], channel: ReadingChannel): CurveFit {
  const scattered = readings.filter(reading => reading.grid !== null)
  if (scattered.length > 0 && scattered.length < readings.length)
    throw new ComputeError('reading_unfit', 'Scattered wedges and typed values (or numbered wedges) are fitted in different ways: a scattered wedge’s places tell uneven coating from tone. Fit a curve from one kind or the other.')
  const path = colourPathFrom(readings)
  const fit = scattered.length > 0 ? fitScattered(scattered, channel, path) : fitPoints(readings, channel, path)
  return {
    ...fit, colourPath: path && path.map(([l, a, b]): [number, number, number] => [l, a, b]),
    warnings: [...fit.warnings, ...curveWarnings({ readings, channel, response: fit.response })],
  }
}

type Fitted = Omit<CurveFit, 'colourPath'>

function fitScattered(readings: readonly CurveReading[], channel: ReadingChannel, path: ColourPath | null): Fitted {
  const prints = samplesOf(readings).map(readings => printOf(readings, channel, path))
  const fit = fitWedge(prints)
  const used = fit.used.flat()
  const patchesUsed = used.filter(Boolean).length
  return {
    response: [...fit.response], low: [...fit.low], high: [...fit.high], lowOfAll: [...fit.lowOfAll], highOfAll: [...fit.highOfAll],
    expectedError: fit.expectedError,
    basis: { prints: prints.length, patchesUsed, patchesDropped: used.length - patchesUsed, noise: fit.noise, printSpread: fit.printSpread, reversal: fit.reversal },
    warnings: fit.reversal ? [reversalWarning(fit.reversal)] : [],
  }
}

/** Readings by print, prints in the order of their names. */
function samplesOf(readings: readonly CurveReading[]): CurveReading[][] {
  const names = [...new Set(readings.map(reading => reading.print))].sort()
  return names.map(name => readings.filter(reading => reading.print === name))
}

/** One print's patches: for each cell the mean of what its readings say of it. */
function printOf(readings: readonly CurveReading[], channel: ReadingChannel, path: ColourPath | null): WedgePrint {
  const cells = cellPlacesOf(readings[0]!.grid!)
  return cells.flatMap(({ x, y, xMm, yMm }, cell): WedgePatch[] => {
    const read = readings.flatMap(({ patches }) => valueOf(patches[cell], channel, path))
    if (read.length === 0) return []
    return [{ level: read[0]!.level, lightness: meanOf(read.map(r => r.value)), x, y, xMm, yMm }]
  })
}

/** None for a patch that could not be read or is not to be used. */
function valueOf(patch: CurveReading['patches'][number] | undefined, channel: ReadingChannel, path: ColourPath | null): { level: number, value: number }[] {
  if (!patch || !patch.used || patch.lightness === null) return []
  return [{ level: patch.level, value: channelValue({ lightness: patch.lightness, lab: patch.lab as LabPoint | null }, channel, path) }]
}

function fitPoints(readings: readonly CurveReading[], channel: ReadingChannel, path: ColourPath | null): Fitted {
  const points = readings.flatMap(({ patches }) => patches.flatMap(patch => valueOf(patch, channel, path))).map(({ level, value }) => ({ level, lightness: value }))
  const prints = samplesOf(readings).length
  const { response, low, high, used, expectedError, warnings } = fitResponse(points, { prints })
  const patchesUsed = used.filter(Boolean).length
  return {
    response, low, high, lowOfAll: null, highOfAll: null, expectedError, warnings,
    basis: { prints, patchesUsed, patchesDropped: used.length - patchesUsed, noise: null, printSpread: null, reversal: null },
  }
}

/** From the colours of pictures, one of each patch of a print; instruments see colours otherwise. Null without enough of them. */
function colourPathFrom(readings: readonly CurveReading[]): ColourPath | null {
  const pictures = samplesOf(readings.filter(r => r.quality !== 'measured'))
  const patches = pictures.flatMap(sample => sample[0]!.patches.flatMap(({ level }, i) => {
    const labs = sample.flatMap(({ patches }) => patches[i]?.used && patches[i].lab ? [patches[i].lab] : [])
    return labs.length === 0 ? [] : [{ level, lab: [0, 1, 2].map(k => meanOf(labs.map(lab => lab[k]!))) as unknown as LabPoint }]
  }))
  return patches.length >= leastPathPatches ? colourPathOf(patches) : null
}

/** Independent of the order, to the last bit. */
const meanOf = (values: number[]): number => values.sort((a, b) => a - b).reduce((a, b) => a + b, 0) / values.length
