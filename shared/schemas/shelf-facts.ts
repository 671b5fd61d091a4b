import { z } from 'zod'
import { path, process } from './benches'
import { limits } from './limits'
import { sideMm, text } from './primitives'
import { shelfLimits } from './shelf-limits'

const within = ([least, most]: readonly [number, number], missing?: string) => z.number(missing).min(least).max(most)
const named = (missing: string) => z.string(missing).trim().min(1, missing).max(limits.nameLength)
/** One line that is written down; what is not known is left out. */
const line = z.string().trim().min(1).max(limits.lineLength)
const day = z.iso.date()
const size = z.strictObject({ widthMm: sideMm, heightMm: sideMm })
const sizes = z.array(size).max(shelfLimits.sizes)
const lots = z.array(z.strictObject({ name: named('Name each lot.'), since: day.optional(), notes: line.optional() })).max(shelfLimits.lots)
const marginMm = z.number().min(0).max(limits.marginMaxMm)

const paper = z.strictObject({
  maker: line, weightGramsPerM2: within(shelfLimits.weightGramsPerM2),
  surface: z.enum(['hot-pressed', 'cold-pressed', 'rough', 'other']),
  fibre: line, sizing: line, alkalineReserve: z.enum(['yes', 'no']), pretreatment: text, coatedSide: line,
  coatingMillilitresPerM2: within(shelfLimits.coatingMillilitresPerM2),
  /** CIE L*a*b*, D50/2°, of the bare sheet */
  white: z.strictObject({ lightness: within(shelfLimits.lightness, 'L* is needed where a* or b* is given.'), a: within(shelfLimits.colourAxis).optional(), b: within(shelfLimits.colourAxis).optional() }),
  sizes, lots,
}).partial()

const sensitizer = z.strictObject({
  process,
  parts: z.array(z.strictObject({
    name: named('Name each part, such as A.'), madeOn: day.optional(), amount: line.optional(),
    substances: z.array(z.strictObject({ substance: named('Name each substance.'), amount: line.optional() })).max(shelfLimits.substances).optional(),
  })).max(shelfLimits.parts),
  mixing: text, keeps: line, keptIn: line, safetySheet: line,
}).partial()

const film = z.strictObject({
  maker: line, thicknessMicrometres: within(shelfLimits.thicknessMicrometres), coatedSide: line,
  dryingMinutes: within(shelfLimits.dryingMinutes),
  /** absolute, of the bare film in the lamp's ultraviolet */
  baseDensityUv: within(shelfLimits.baseDensityUv),
  sizes, rollWidthMm: sideMm, lots,
}).partial()

/** A path as an inkjet keeps it: the settings under a name, for benches to take. */
export const namedPath = path.extend({ name: named('Name each path.') })
export type NamedPath = z.infer<typeof namedPath>

const inkjet = z.strictObject({
  model: line, inks: line,
  nativePixelsPerInch: z.array(z.number().int().min(limits.pixelsPerInchMin).max(limits.pixelsPerInchMax)).max(shelfLimits.resolutions),
  widestSheetMm: sideMm,
  unprintableMm: z.strictObject({ top: marginMm, right: marginMm, bottom: marginMm, left: marginMm }).partial(),
  /** length wanted ÷ length printed; X lies across the sheet's way, Y along it */
  scaleX: within(shelfLimits.scaleFactor), scaleY: within(shelfLimits.scaleFactor),
  paths: z.array(namedPath).max(shelfLimits.paths)
    .refine(paths => new Set(paths.map(p => p.name.toLowerCase())).size === paths.length, 'Two paths have the same name.'),
}).partial()

const lamp = z.strictObject({
  source: z.enum(['uv-led', 'tubes', 'metal-halide', 'mercury', 'sun', 'other']),
  peakNanometres: within(shelfLimits.peakNanometres), watts: within(shelfLimits.watts),
  distanceMm: within(shelfLimits.distanceMm), warmUpMinutes: within(shelfLimits.warmUpMinutes),
  integrator: z.enum(['yes', 'no']), burnedHours: within(shelfLimits.burnedHours), renewedOn: day, evenness: line, shielding: line,
}).partial()

const scanner = z.strictObject({
  model: line, kind: z.enum(['flatbed', 'camera-stand', 'film-scanner', 'other']),
  pixelsPerInch: z.number().int().min(shelfLimits.scannerPixelsPerInch[0]).max(shelfLimits.scannerPixelsPerInch[1]),
  bitDepth: z.union([z.literal(8), z.literal(16)]), transparency: z.enum(['yes', 'no']),
  area: size,
  program: line, corrections: z.enum(['off', 'on']), colourProfile: line,
}).partial()

/** What may be known of a thing, by its drawer: all of it optional, lengths in mm. */
export const shelfFacts = { papers: paper, sensitizers: sensitizer, films: film, inkjets: inkjet, lamps: lamp, scanners: scanner } as const
export type ShelfKind = keyof typeof shelfFacts
export type ShelfFacts = { [K in ShelfKind]: z.infer<typeof shelfFacts[K]> }
