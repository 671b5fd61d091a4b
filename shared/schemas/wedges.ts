import { z } from 'zod'
import { exposureUnit, inkColor, path } from './benches'
import { endpoint, streamed } from './endpoint'
import { limits } from './limits'
import { filmFormat, printSize, render } from './negatives'
import { fraction, id, instant, listOf, listQuery, newId, revision, text } from './primitives'

/**
 * What can be put on film to calibrate a bench: the step wedges, and the sheets of the steps before and beside them.
 * `exposure-strip` and `step-tablet` are guides of clear film whose places are read like patches; `ink-load` is judged by hand and eye.
 */
export const wedgeKinds = ['scattered', 'numbered', 'ink-trial', 'ink-load', 'exposure-strip', 'step-tablet'] as const
export const wedgeKind = z.enum(wedgeKinds)
export type WedgeKind = z.infer<typeof wedgeKind>

/** Ten half-stop steps, once in each direction: the shortest exposure, and what each step adds. */
export const exposureStripPlan = z.strictObject({
  firstExposure: z.number().positive().max(1e6), unit: exposureUnit.default('s'),
  steps: z.number().int().min(5).max(14).default(10), stopsPerStep: z.number().min(0.25).max(1).default(0.5),
})
/** A step tablet as it lies in the hand; its densities are absolute, or 0.15 a step where they are not known. */
export const tabletPlan = z.strictObject({
  steps: z.number().int().min(5).max(41).default(21),
  stepWidthMm: z.number().min(4).max(20), stepHeightMm: z.number().min(5).max(40),
  densities: z.array(z.number().min(0).max(6)).max(41).optional(),
})
/** Ink mixes to try, each the colour of full ink. */
export const inkMixes = z.array(inkColor).min(2).max(6)

export const wedgeBody = z.strictObject({
  id: newId,
  page: printSize,
  kind: wedgeKind.default('scattered'),
  pixelsPerInch: z.number().int().min(limits.pixelsPerInchMin).max(limits.pixelsPerInchMax).optional(),
  throughCurveId: id.optional(),
  /** of a numbered wedge */
  steps: z.union([z.literal(21), z.literal(31)]).optional(),
  inkMixes: inkMixes.optional(), exposureStrip: exposureStripPlan.optional(), tablet: tabletPlan.optional(),
})

export const wedgePatch = z.object({
  level: fraction, tone: fraction.optional(),
  xMm: z.number(), yMm: z.number(), widthMm: z.number(), heightMm: z.number(),
  /** of an ink trial: the mix of this patch */
  inkColor: z.string().optional(),
  /** of an exposure strip: seconds or dose that the patch gets in all; of a step tablet: its density */
  exposure: z.number().optional(), density: z.number().optional(),
})
export const wedge = z.object({
  id, benchId: id, code: z.string(), kind: wedgeKind,
  page: z.object({ widthMm: z.number(), heightMm: z.number() }), pixelsPerInch: z.number().int(), throughCurveId: id.nullable(),
  inkColor: z.string(), path,
  /** of an exposure strip: what its patches’ exposures count */
  exposureUnit: exposureUnit.nullable(),
  patches: z.array(wedgePatch), renders: z.array(render), printCount: z.number().int(), archivedAt: instant.nullable(), createdAt: instant,
})
export type Wedge = z.infer<typeof wedge>
/** In lists the patches are left out. */
export const wedgeBrief = wedge.omit({ patches: true })
export type WedgeBrief = z.infer<typeof wedgeBrief>

const exposure = z.strictObject({ value: z.number().positive().max(1e6), unit: exposureUnit })
export const wedgePrintBody = z.strictObject({
  id: newId, number: z.number().int().min(1).max(9999).optional(),
  exposure: exposure.optional(), exposedAt: instant.optional(), driedSince: instant.optional(), notes: text.optional(),
})
export const wedgePrintPatch = z.strictObject({ revision, exposure: exposure.nullish(), driedSince: instant.nullish(), notes: text.optional() })
export const wedgePrint = z.object({
  id, wedgeId: id, benchId: id, number: z.number().int(),
  exposure: z.object({ value: z.number(), unit: exposureUnit }).nullable(), exposedAt: instant.nullable(),
  driedSince: instant.nullable(), driedHours: z.number().nullable(), notes: z.string(), createdAt: instant, revision,
})
export type WedgePrintRecord = z.infer<typeof wedgePrint>

const bench = '/api/studios/:studio/benches/:bench/wedges' as const
const root = '/api/studios/:studio/wedges/:wedge' as const
const fileTypes = ['application/pdf', 'image/tiff', 'image/png'] as const
export const wedgeEndpoints = {
  listWedges: endpoint({ method: 'GET', path: bench, access: 'member', summary: 'Wedges and guides of a bench, newest first.', query: listQuery.extend({ kind: wedgeKind.optional() }), answers: { 200: listOf(wedgeBrief) } }),
  createWedge: endpoint({ method: 'POST', path: bench, access: 'technician', summary: 'Lay out a wedge for this bench.', body: wedgeBody, answers: { 200: wedge, 201: wedge } }),
  wedge: endpoint({ method: 'GET', path: root, access: 'member', summary: 'One wedge with its patches.', answers: { 200: wedge } }),
  wedgeFile: endpoint({ method: 'GET', path: `${root}/file`, access: 'technician', summary: 'The film file, mirrored; 202 while it is being made. HEAD, Range, ETag.', query: z.strictObject({ format: filmFormat.default('pdf') }), answers: { 200: fileTypes, 202: render, ...streamed(fileTypes) } }),
  wedgePreview: endpoint({ method: 'GET', path: `${root}/preview`, access: 'member', summary: 'The wedge as the print reads, as a small picture.', query: z.strictObject({ width: z.coerce.number().int().min(64).max(1600).default(600) }), answers: { 200: ['image/png'], ...streamed(['image/png']) } }),
  archiveWedge: endpoint({ method: 'DELETE', path: root, access: 'technician', summary: 'Put a wedge away; its readings stay.', answers: { 204: null } }),
  listWedgePrints: endpoint({ method: 'GET', path: `${root}/prints`, access: 'member', summary: 'Prints of a wedge.', query: listQuery, answers: { 200: listOf(wedgePrint) } }),
  createWedgePrint: endpoint({ method: 'POST', path: `${root}/prints`, access: 'technician', summary: 'A print of this wedge, with its number.', body: wedgePrintBody, answers: { 200: wedgePrint, 201: wedgePrint } }),
  changeWedgePrint: endpoint({ method: 'PATCH', path: '/api/studios/:studio/wedge-prints/:print', access: 'technician', summary: 'When it was hung to dry, its exposure, notes.', body: wedgePrintPatch, answers: { 200: wedgePrint } }),
}

/** Why a tone is not where it should be, and what to do; `evidence` names the measured figures. */
export const cause = z.object({ code: z.enum(['expose-longer', 'expose-less', 'more-ink', 'less-ink', 'wash', 'press-harder', 'rotate-frame', 'wrong-side-up']), message: z.string(), evidence: z.string() })
export type Cause = z.infer<typeof cause>
