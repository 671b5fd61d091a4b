import { z } from 'zod'
import { arePointsApart, leastPointDistance } from '../tone/adjustments'
import { leastMixLuminance, mixLuminance } from '../tone/mix'
import { process } from './benches'
import { aim, warning, workState } from './curves'
import { endpoint, streamed } from './endpoint'
import { limits } from './limits'
import { fraction, id, instant, listOf, listQuery, name, newId, revision, sideMm } from './primitives'

export const printSize = z.strictObject({ widthMm: sideMm, heightMm: sideMm })
export const crop = z.strictObject({ x: fraction, y: fraction, width: fraction.gt(0), height: fraction.gt(0) })
  .refine(c => c.x + c.width <= 1 + 1e-9 && c.y + c.height <= 1 + 1e-9, 'The crop reaches beyond the picture.')

/** Each has its neutral value as default; `shared/tone/adjustments.ts` holds the formulas. */
export const adjustments = z.strictObject({
  mix: z.strictObject({ red: z.number().min(-2).max(3).default(1), green: z.number().min(-2).max(3).default(1), blue: z.number().min(-2).max(3).default(1) })
    .refine(mix => mixLuminance(mix) > leastMixLuminance, 'This mix leaves no tones. Raise one of the channels.')
    .prefault({}),
  blackPoint: z.number().min(0).max(0.9).default(0),
  whitePoint: z.number().min(0.1).max(1).default(1),
  midtone: z.number().min(-1).max(1).default(0),
  contrast: z.number().min(-1).max(1).default(0),
}).refine(arePointsApart, { message: `The white point must lie at least ${leastPointDistance} above the black point.`, path: ['whitePoint'] })
export type Adjustments = z.infer<typeof adjustments>

export const margin = z.strictObject({ mm: z.number().min(0).max(limits.marginMaxMm), kind: z.enum(['clear', 'opaque']) })
export const marks = z.strictObject({ ruler: z.boolean().default(false), label: z.boolean().default(false) })

const settings = {
  name: name.optional(),
  size: printSize,
  fit: z.enum(['crop', 'contain']).default('crop'),
  crop: crop.optional(),
  quarterTurns: z.number().int().min(0).max(3).default(0),
  straightenDegrees: z.number().min(-45).max(45).default(0),
  pixelsPerInch: z.number().int().min(limits.pixelsPerInchMin).max(limits.pixelsPerInchMax).default(360),
  mirror: z.boolean().optional(),
  aim: aim.optional(),
  adjustments: adjustments.prefault({}),
  margin: margin.prefault({ mm: 0, kind: 'clear' }),
  marks: marks.prefault({}),
}
export const negativeBody = z.strictObject({ id: newId, photoId: id, benchId: id.optional(), process: process.optional(), curveId: id.optional(), ...settings })
  .refine(b => (b.benchId === undefined) !== (b.process === undefined), { message: 'Name a bench or a process, not both.', path: ['benchId'] })
/** Whole settings groups are replaced; what is left out stays as it was. `curveId: 'in-use'` takes the bench’s present curve. */
export const negativePatch = z.strictObject({
  revision, name: name.optional(), benchId: id.optional(), curveId: z.union([id, z.literal('in-use')]).optional(),
  size: printSize.optional(), fit: z.enum(['crop', 'contain']).optional(), crop: crop.nullable().optional(),
  quarterTurns: z.number().int().min(0).max(3).optional(), straightenDegrees: z.number().min(-45).max(45).optional(),
  pixelsPerInch: z.number().int().min(limits.pixelsPerInchMin).max(limits.pixelsPerInchMax).optional(),
  mirror: z.boolean().optional(), aim: aim.nullable().optional(), adjustments: adjustments.optional(), margin: margin.optional(), marks: marks.optional(),
})

export const filmFormats = ['tiff', 'png', 'pdf'] as const
export const filmFormat = z.enum(filmFormats)
export type FilmFormat = z.infer<typeof filmFormat>
export const render = z.object({ id, format: filmFormat, state: workState, progress: fraction, bytes: z.number().nullable(), sha256: z.string().nullable(), error: warning.nullable() })

export const negative = z.object({
  id, name: z.string(), photoId: id, benchId: id, curveId: id, process, createdBy: id,
  size: z.object({ widthMm: z.number(), heightMm: z.number() }), fit: z.enum(['crop', 'contain']),
  /** as resolved: the part of the upright, turned, straightened picture that is printed */
  crop: z.object({ x: z.number(), y: z.number(), width: z.number(), height: z.number() }),
  quarterTurns: z.number().int(), straightenDegrees: z.number(), pixelsPerInch: z.number().int(), mirror: z.boolean(), aim,
  adjustments: z.object({ mix: z.object({ red: z.number(), green: z.number(), blue: z.number() }), blackPoint: z.number(), whitePoint: z.number(), midtone: z.number(), contrast: z.number() }),
  margin: z.object({ mm: z.number(), kind: z.enum(['clear', 'opaque']) }), marks: z.object({ ruler: z.boolean(), label: z.boolean() }),
  film: z.object({ widthPixels: z.number().int(), heightPixels: z.number().int(), widthMm: z.number(), heightMm: z.number() }),
  curve: z.object({ id, version: z.number().int(), calibrated: z.boolean() }),
  /** a curve put in use since; offered, never applied by itself */
  newerCurve: z.object({ id, version: z.number().int() }).nullable(),
  warnings: z.array(warning), renders: z.array(render),
  /** since when a student’s teachers see it */
  handedInAt: instant.nullable(), createdAt: instant, revision,
})
export type Negative = z.infer<typeof negative>

const root = '/api/studios/:studio/negatives' as const
export const negativeEndpoints = {
  listNegatives: endpoint({ method: 'GET', path: root, access: 'member', summary: 'Negatives that one may see.', query: listQuery.extend({ photoId: id.optional() }), answers: { 200: listOf(negative) } }),
  createNegative: endpoint({ method: 'POST', path: root, access: 'member', summary: 'Make a negative of a photo.', body: negativeBody, answers: { 200: negative, 201: negative } }),
  negative: endpoint({ method: 'GET', path: `${root}/:negative`, access: 'member', summary: 'One negative.', answers: { 200: negative } }),
  changeNegative: endpoint({ method: 'PATCH', path: `${root}/:negative`, access: 'member', summary: 'Change its settings.', body: negativePatch, answers: { 200: negative } }),
  archiveNegative: endpoint({ method: 'DELETE', path: `${root}/:negative`, access: 'member', summary: 'Put a negative away.', answers: { 204: null } }),
  negativeFile: endpoint({ method: 'GET', path: `${root}/:negative/file`, access: 'member', summary: 'The film file; 202 while it is being made. HEAD, Range, ETag.', query: z.strictObject({ format: filmFormat.default('pdf') }), answers: { 200: ['image/tiff', 'image/png', 'application/pdf'], 202: render, ...streamed(['image/tiff', 'image/png', 'application/pdf']) } }),
  makeRender: endpoint({ method: 'POST', path: `${root}/:negative/renders`, access: 'member', afterClass: true, summary: 'Have a film file made, or made again after it failed.', body: z.strictObject({ format: filmFormat }), answers: { 200: render, 202: render } }),
  negativeForecast: endpoint({ method: 'GET', path: `${root}/:negative/forecast`, access: 'member', summary: 'The expected print as a picture.', query: z.strictObject({ width: z.coerce.number().int().min(16).max(2400).default(600), state: z.enum(['photo', 'film', 'print']).default('print') }), answers: { 200: ['image/png'], ...streamed(['image/png']) } }),
  negativePrintCard: endpoint({ method: 'GET', path: `${root}/:negative/print-card`, access: 'member', summary: 'What to check and set before printing this film.', query: z.strictObject({ format: filmFormat.default('pdf') }), answers: { 200: z.object({ title: z.string(), lines: z.array(z.object({ label: z.string(), text: z.string() })) }) } }),
}
