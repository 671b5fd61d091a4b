import { z } from 'zod'
import { endpoint } from './endpoint'
import { pictureFormats } from './picture-formats'
import { fraction, id, instant, listOf, listQuery, newId, revision, text } from './primitives'

export const aims = ['even-lightness', 'keep-middle-tones', 'even-density'] as const
export const aim = z.enum(aims)
export type Aim = z.infer<typeof aim>
export const curveStates = ['draft', 'in-use', 'retired'] as const
export const workStates = ['waiting', 'making', 'ready', 'failed'] as const
export const workState = z.enum(workStates)
export const readingUnits = ['lightness', 'density', 'reflectance'] as const
export const zeros = ['absolute', 'paper'] as const

export const warning = z.object({ code: z.string(), message: z.string() })
export type Warning = z.infer<typeof warning>

const measured = z.strictObject({ level: fraction, value: z.number().min(-1).max(120) })
export const readingBody = z.strictObject({
  id: newId,
  unit: z.enum(readingUnits),
  zero: z.enum(zeros).optional(),
  paperLightness: z.number().min(20).max(100).optional(),
  values: z.array(measured).max(5000),
})
export const readingQuery = z.strictObject({
  id: newId, zero: z.enum(zeros).optional(), paperLightness: z.coerce.number().min(20).max(100).optional(),
})

export const readingPatch = z.object({
  level: fraction, lightness: z.number().nullable(),
  lab: z.tuple([z.number(), z.number(), z.number()]).nullable(),
  deviation: z.number().nullable(), used: z.boolean(),
})
const place = z.object({ lightness: z.number(), lab: z.tuple([z.number(), z.number(), z.number()]), deviation: z.number() }).nullable()
/** What a scan shows beside its patches. */
export const readingEvidence = z.object({
  /** upright, after the file's own orientation tag */
  picture: z.object({ width: z.number().int(), height: z.number().int() }),
  code: z.string().nullable(), pixelsPerInch: z.number(), turnedDegrees: z.number(), mirrored: z.boolean(), inverted: z.boolean(), markersSeen: z.number().int(),
  /** width of printed edges, 10 to 90 %; null where no marker was seen */
  edgeWidthMm: z.number().nullable(), glareShare: z.number(),
  /** beside each marker */
  references: z.array(z.object({ fullInk: place, clear: place })),
  diagnostics: z.object({ foil: place, bare: place, uncoated: place }),
  /** four corners of each patch’s read part, pixels of the upright picture, x and y in turn */
  cells: z.array(z.array(z.number())),
})
export type ReadingEvidence = z.infer<typeof readingEvidence>
export const reading = z.object({
  id, benchId: id, state: workState, quality: z.enum(['scan', 'phone', 'measured']),
  unit: z.enum(readingUnits).nullable(), zero: z.enum(zeros).nullable(), paperLightness: z.number().nullable(),
  corners: z.array(z.tuple([z.number(), z.number()])).nullable(),
  patches: z.array(readingPatch), warnings: z.array(warning), createdAt: instant,
  /** of a scan; null for typed values */
  wedgeId: id.nullable(), wedgePrintId: id.nullable(), printNumber: z.number().int().nullable(), scannerId: id.nullable(), scannerProfileId: id.nullable(),
  progress: fraction, error: warning.nullable(),
  evidence: readingEvidence.nullable(),
  /** the scan’s file; sides are the upright picture’s, known once it was looked into */
  file: z.object({ name: z.string(), bytes: z.number().int(), format: z.enum(pictureFormats).nullable(), width: z.number().int().nullable(), height: z.number().int().nullable() }).nullable(),
})
export type Reading = z.infer<typeof reading>

export const curvePoint = z.object({ tone: fraction, level: fraction, levelLow: fraction, levelHigh: fraction })
const errorFigures = z.object({ median: z.number(), p95: z.number() })
export const curve = z.object({
  id, benchId: id, version: z.number().int().min(1), state: z.enum(curveStates), aim,
  /** false for a starter curve: it rests on assumptions, not on a reading */
  calibrated: z.boolean(), assumptions: z.array(z.string()),
  readingIds: z.array(id),
  blackLightness: z.number(), whiteLightness: z.number(),
  points: z.array(curvePoint),
  /** the reading channel's value at 1025 equal steps of ink level, clear film first: what the page's preview works from */
  response: z.array(z.number()),
  /** `nextPrintWithOneMore`: what the next print would do if one more wedge print were read */
  expectedError: z.object({ nextPrint: errorFigures, curve: errorFigures, nextPrintWithOneMore: errorFigures.optional() }).nullable(),
  /** of a fit with positions: prints pooled, and what parted them and their patches, L* */
  basis: z.object({ prints: z.number().int(), patchesUsed: z.number().int(), patchesDropped: z.number().int(), noise: z.number().nullable(), printSpread: z.number().nullable(), reversal: z.object({ level: fraction, rise: z.number(), significance: z.number() }).nullable() }).nullable(),
  /** L*, a*, b* of the print from paper white to deepest tone, from scanned patches */
  colourPath: z.array(z.tuple([z.number(), z.number(), z.number()])).nullable(),
  /** L* at the same 1025 levels: a 95 % band that holds for all of them at once; the points' band holds for each by itself */
  bandOfAll: z.object({ low: z.array(z.number()), high: z.array(z.number()) }).nullable(),
  /** `createdBy`: the name of who fitted it */
  warnings: z.array(warning), notes: z.string(), createdBy: z.string().nullable(), createdAt: instant, inUseSince: instant.nullable(), revision,
})
export type Curve = z.infer<typeof curve>
/** In lists the long tables are left out. */
export const curveBrief = curve.omit({ points: true, response: true, colourPath: true, bandOfAll: true })
export type CurveBrief = z.infer<typeof curveBrief>

export const curveBody = z.strictObject({
  id: newId,
  readingIds: z.array(id).min(1).max(50).refine(ids => new Set(ids).size === ids.length, 'Name each reading once.'),
  aim: aim.optional(), notes: text.optional(),
})

export const curvePatch = z.strictObject({ revision, notes: text })

const bench = '/api/studios/:studio/benches/:bench' as const
const curves = '/api/studios/:studio/curves/:curve' as const
export const curveEndpoints = {
  listReadings: endpoint({ method: 'GET', path: `${bench}/readings`, access: 'member', summary: 'Readings of a bench.', query: listQuery, answers: { 200: listOf(reading) } }),
  createReading: endpoint({
    method: 'POST', path: `${bench}/readings`, access: 'technician', summary: 'Measured values, typed in or imported; or a scan, which finds its wedge by the code on it.',
    query: readingQuery, body: readingBody,
    otherBodies: { 'text/csv': 'A header line `level,lightness|density|reflectance`, then a row a patch.', 'text/plain': 'CGATS text (ISO 28178) with a level column and LAB_L, D_VIS or a reflectance.', 'multipart/form-data': 'The picture of a wedge print as `scan`, with the fields of a wedge’s own readings.' },
    answers: { 200: reading, 201: reading, 202: reading },
  }),
  reading: endpoint({ method: 'GET', path: '/api/studios/:studio/readings/:reading', access: 'member', summary: 'One reading.', answers: { 200: reading } }),
  listCurves: endpoint({ method: 'GET', path: `${bench}/curves`, access: 'member', summary: 'Curve versions of a bench.', query: listQuery, answers: { 200: listOf(curveBrief) } }),
  createCurve: endpoint({
    method: 'POST', path: `${bench}/curves`, access: 'technician', summary: 'Fit a draft curve from readings.',
    body: curveBody, answers: { 200: curve, 201: curve },
  }),
  curve: endpoint({ method: 'GET', path: curves, access: 'member', summary: 'One curve with its points.', answers: { 200: curve } }),
  changeCurve: endpoint({ method: 'PATCH', path: curves, access: 'technician', summary: 'Note something about a curve; its figures never change.', body: curvePatch, answers: { 200: curve } }),
  useCurve: endpoint({ method: 'POST', path: `${curves}/use`, access: 'technician', summary: 'Put a curve in use; the one before is retired.', answers: { 200: curve } }),
  retireCurve: endpoint({ method: 'POST', path: `${curves}/retire`, access: 'technician', summary: 'Retire a curve.', answers: { 200: curve } }),
  curveTable: endpoint({ method: 'GET', path: `${curves}/table`, access: 'member', summary: 'The curve as 1025 named rows.', query: z.strictObject({ format: z.enum(['csv', 'json', 'cgats']).default('csv') }), answers: { 200: ['text/csv', 'application/json', 'text/plain'] } }),
}
