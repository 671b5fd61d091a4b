import { z } from 'zod'
import { exposureUnit, process } from './benches'
import { aim, curve, warning } from './curves'
import { endpoint } from './endpoint'
import { fraction, id, instant, listOf, listQuery, newId, text } from './primitives'

const lightness = z.number().min(0).max(100)
const density = z.number().min(0).max(6)
const benchRoot = '/api/studios/:studio/benches/:bench' as const

// ── The walk through a calibration ──────────────────────────────────────────────────────────────────────────────────────
/** The steps in the order the work happens. */
export const walkSteps = ['path', 'ink-load', 'base-exposure', 'ink-trial', 'wedge', 'expose', 'read', 'curve', 'check'] as const
export const walkStep = z.enum(walkSteps)
export type WalkStep = z.infer<typeof walkStep>
export const walkStates = ['open', 'done', 'skipped'] as const
const clock = z.object({ startedAt: instant, seconds: z.number().int(), endsAt: instant })
/** `state` is what a person said; where nothing was said, what the records show. */
export const walkStepRecord = z.object({ step: walkStep, state: z.enum(walkStates), optional: z.boolean(), clock: clock.nullable(), notes: z.string(), changedAt: instant.nullable(), revision: z.number().int().min(0) })
export const walk = z.object({ benchId: id, now: walkStep.nullable(), steps: z.array(walkStepRecord) })
export type Walk = z.infer<typeof walk>
/** `clockSeconds` starts a clock, null stops it. Revision 0 is a step that nobody has touched yet. */
export const walkPatch = z.strictObject({ revision: z.number().int().min(0), state: z.enum(walkStates).nullish(), clockSeconds: z.number().int().min(1).max(7 * 86_400).nullish(), notes: text.optional() })
export const walkEndpoints = {
  walk: endpoint({ method: 'GET', path: `${benchRoot}/walk`, access: 'member', summary: 'How far this bench’s calibration has come.', answers: { 200: walk } }),
  changeWalkStep: endpoint({ method: 'PATCH', path: `${benchRoot}/walk/:step`, access: 'technician', summary: 'Mark a step, start or stop its clock, note something.', body: walkPatch, answers: { 200: walk } }),
}

// ── Scanner profiles ────────────────────────────────────────────────────────────────────────────────────────────────────
const profilePoint = z.strictObject({ scanned: lightness, measured: lightness })
/** Pairs as they are, or the patches of a reading that an instrument measured too (by their place in the wedge’s order). */
export const scannerProfileBody = z.strictObject({
  id: newId, process, notes: text.optional(),
  kind: z.enum(['grey-scale', 'own-print']),
  points: z.array(profilePoint).min(3).max(200).optional(),
  readingId: id.optional(), measured: z.array(z.strictObject({ patch: z.number().int().min(0), lightness })).max(600).optional(),
}).refine(b => (b.points === undefined) !== (b.readingId === undefined), { message: 'Give points, or a reading with measured patches.', path: ['points'] })
export const scannerProfile = z.object({
  id, scannerId: id, process, kind: z.enum(['grey-scale', 'own-print']), points: z.array(profilePoint),
  /** the range of scanned lightness that the points reach; beyond it the ends' shift is held */
  from: z.number(), to: z.number(), warnings: z.array(warning), notes: z.string(), archivedAt: instant.nullable(), createdAt: instant,
})
export type ScannerProfile = z.infer<typeof scannerProfile>
const profiles = '/api/studios/:studio/scanner-profiles/:scanner' as const
export const scannerProfileEndpoints = {
  listScannerProfiles: endpoint({ method: 'GET', path: profiles, access: 'member', summary: 'Profiles of a scanner; the newest of a process counts.', query: listQuery, answers: { 200: listOf(scannerProfile) } }),
  createScannerProfile: endpoint({ method: 'POST', path: profiles, access: 'technician', summary: 'Teach the service how this scanner sees a process.', body: scannerProfileBody, answers: { 200: scannerProfile, 201: scannerProfile } }),
  archiveScannerProfile: endpoint({ method: 'DELETE', path: `${profiles}/:profile`, access: 'technician', summary: 'Put a profile away; readings made with it stay.', answers: { 204: null } }),
}

// ── Step tablets and what follows from them ─────────────────────────────────────────────────────────────────────────────
/** From a scanned guide, or values read by hand. */
export const tabletBody = z.strictObject({
  id: newId, readingId: id.optional(),
  values: z.array(z.strictObject({ density, lightness })).min(5).max(200).optional(),
  exposure: z.strictObject({ value: z.number().positive().max(1e6), unit: exposureUnit }).optional(),
}).refine(b => (b.values === undefined) !== (b.readingId === undefined), { message: 'Give values or a reading.', path: ['values'] })
export const tablet = z.object({
  id, benchId: id, readingId: id.nullable(), values: z.array(z.object({ density: z.number(), lightness: z.number() })),
  exposure: z.object({ value: z.number(), unit: exposureUnit }).nullable(),
  /** log H between the paper’s first tone and its full black; null where the tablet does not reach */
  exposureScale: z.number().nullable(),
  /** ISO 6846:1992 exposure range R = 100 · (log H_S − log H_T), with which 90 % it means */
  isoRange: z.number().nullable(), isoSays: z.string(),
  maxDensity: z.number(), paperDensity: z.number(),
  /** the last step that still prints as full black at the base exposure; for working by dose or sun */
  targetStep: z.number().nullable(),
  /** density of the tablet behind which the print is still within 1 L* of its black */
  fullBlackDensity: z.number().nullable(), warnings: z.array(warning), createdAt: instant,
})
export type Tablet = z.infer<typeof tablet>
/** Effective UV density of each ink level on this film under this lamp, from a wedge and a tablet on one print. */
export const filmDensities = z.object({
  id, benchId: id, tabletId: id, curveId: id,
  points: z.array(z.object({ level: fraction, density: z.number(), deviation: z.number() })), warnings: z.array(warning), createdAt: instant,
})
export type FilmDensities = z.infer<typeof filmDensities>
/** Film densities of a bench with the same film, ink, lamp and process family. */
const filmCurveBody = z.strictObject({ id: newId, filmDensitiesId: id, aim: aim.optional(), notes: text.optional() })
export const tabletEndpoints = {
  listTablets: endpoint({ method: 'GET', path: `${benchRoot}/tablets`, access: 'member', summary: 'Step tablets printed on this bench.', query: listQuery, answers: { 200: listOf(tablet) } }),
  createTablet: endpoint({ method: 'POST', path: `${benchRoot}/tablets`, access: 'technician', summary: 'Exposure scale and paper range from a contact-printed step tablet.', body: tabletBody, answers: { 200: tablet, 201: tablet } }),
  listFilmDensities: endpoint({ method: 'GET', path: `${benchRoot}/film-densities`, access: 'member', summary: 'What the film’s ink levels hold back.', query: listQuery, answers: { 200: listOf(filmDensities) } }),
  filmCurve: endpoint({ method: 'POST', path: `${benchRoot}/tablets/:tablet/film-curve`, access: 'technician', summary: 'A draft curve for this bench from its tablet and another bench’s film densities, with the stated extra uncertainty.', body: filmCurveBody, answers: { 200: curve, 201: curve } }),
  createFilmDensities: endpoint({ method: 'POST', path: `${benchRoot}/film-densities`, access: 'technician', summary: 'Split film from paper by a tablet and a curve of this bench.', body: z.strictObject({ id: newId, tabletId: id, curveId: id }), answers: { 200: filmDensities, 201: filmDensities } }),
}

// ── Two benches on the same axes ────────────────────────────────────────────────────────────────────────────────────────
/** L* at the tone that shows each most: within patches (null where no spread was read), between patches, from the middle to the side. */
const evenness = z.object({ texture: z.number().nullable(), mottle: z.number(), gradient: z.number() })
const compared = z.object({ benchId: id, name: z.string(), curveId: id, version: z.number().int(), response: z.array(z.number()), paperLightness: z.number(), deepestLightness: z.number(), maxDensity: z.number(), densityRange: z.number(), contrast: z.number(), evenness: evenness.nullable() })
export const comparison = z.object({
  benches: z.tuple([compared, compared]),
  differences: z.array(z.object({ part: z.string(), first: z.string(), second: z.string() })), warnings: z.array(warning),
})
export type Comparison = z.infer<typeof comparison>
export const comparisonEndpoints = {
  compareBenches: endpoint({ method: 'GET', path: `${benchRoot}/comparison`, access: 'member', summary: 'This bench beside another.', query: z.strictObject({ with: id }), answers: { 200: comparison } }),
}
