import { z } from 'zod'
import { reading } from './curves'
import { endpoint } from './endpoint'
import { id, instant, listOf, listQuery, name, newId, revision, text } from './primitives'
import { scanMedia } from './scans'

export const processes = ['cyanotype', 'van-dyke', 'salt', 'kallitype', 'platinum-palladium', 'gum', 'carbon', 'other'] as const
export const process = z.enum(processes)
export type Process = z.infer<typeof process>

export const readingChannels = ['lightness', 'density-blue', 'density-green', 'density-red', 'colour-path'] as const
export const readingChannel = z.enum(readingChannels)
export type ReadingChannel = z.infer<typeof readingChannel>

/** The wet and coating side of a bench. */
export const recipe = z.strictObject({
  coats: z.number().int().min(1).max(10),
  coatedWith: z.enum(['brush', 'rod', 'float', 'other']),
  drying: text, contact: text, contrastAgent: text, developer: text,
  developerTemperatureCelsius: z.number().min(0).max(100),
  firstBath: text, clearing: text, toner: text,
}).partial()

/** How film files reach the inkjet. */
export const path = z.strictObject({
  fileKind: z.enum(['pdf', 'tiff', 'png']),
  bitDepth: z.union([z.literal(8), z.literal(16)]),
  sentBy: name,
  pixelsPerInch: z.number().int().min(72).max(1440),
  mediaType: name, quality: name,
  colourAdjustment: z.enum(['off', 'on', 'unknown']),
  filmSide: name,
}).partial()

export const inkColor = z.string().regex(/^#[0-9a-f]{6}$/i, 'Write the ink colour as #rrggbb.')
export const ink = z.strictObject({ color: inkColor })
export const exposureUnit = z.enum(['s', 'dose'])
export const baseExposureValue = z.strictObject({ value: z.number().positive().max(1e6), unit: exposureUnit })

/** What makes the combination: a change of any of these makes another bench. */
export const combination = {
  process,
  paperId: id.optional(), sensitizerId: id.optional(), filmId: id.optional(), inkjetId: id.optional(), lampId: id.optional(),
  recipe: recipe.optional(), path: path.optional(), ink: ink.optional(), readingChannel: readingChannel.optional(), mirror: z.boolean().optional(),
}
export const benchBody = z.strictObject({ id: newId, name, ...combination, baseExposure: baseExposureValue.optional() })
const changes = {
  name: name.optional(), ...combination, process: process.optional(),
  paperId: id.nullish(), sensitizerId: id.nullish(), filmId: id.nullish(), inkjetId: id.nullish(), lampId: id.nullish(),
  baseExposure: baseExposureValue.optional(),
}
/** What is left out stays; null takes something off the bench. */
export const benchPatch = z.strictObject({ ...changes, revision })
export const benchCopy = z.strictObject({ id: newId, ...changes })

const curveBrief = z.object({ id, version: z.number().int(), calibrated: z.boolean(), blackLightness: z.number(), whiteLightness: z.number() })
export const bench = z.object({
  id, name: z.string(), process,
  paperId: id.nullable(), sensitizerId: id.nullable(), filmId: id.nullable(), inkjetId: id.nullable(), lampId: id.nullable(),
  recipe, path, ink, readingChannel, mirror: z.boolean(),
  /** true for the service’s own benches, whose curve rests on printed assumptions only */
  starter: z.boolean(),
  /** true once it has wedge prints or readings, and for a starter: another combination is a copy */
  combinationFixed: z.boolean(),
  assumptions: z.array(z.string()),
  baseExposure: z.object({ value: z.number(), unit: exposureUnit, low: z.number().nullable(), high: z.number().nullable(), since: instant }).nullable(),
  curveInUse: curveBrief.nullable(),
  archivedAt: instant.nullable(), createdAt: instant, revision,
})
export type Bench = z.infer<typeof bench>

const strip = z.array(z.strictObject({ exposureSeconds: z.number().positive().max(1e6), lightness: z.number().min(0).max(100) })).min(1).max(500)
/** What the base exposure is the shortest for: full black, a gum layer that survives its development, a density of a printing-out print. */
export const exposureGoal = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('full-black') }),
  z.strictObject({ kind: z.literal('layer-survives'), share: z.number().min(0.5).max(0.99).optional() }),
  z.strictObject({ kind: z.literal('chosen-density'), density: z.number().min(0.2).max(4) }),
])
/** A strip's values (a repeated strip simply adds values; light units stand in `exposureSeconds` where `unit` says so), or a reading of a strip. */
export const baseExposureBody = z.strictObject({
  id: newId, values: strip.optional(), readingId: id.optional(), unit: exposureUnit.optional(), goal: exposureGoal.optional(),
}).refine(b => (b.values === undefined) !== (b.readingId === undefined), { message: 'Give values or a reading.', path: ['values'] })

/** Seconds are null for an exposure in light units; low and high are null where it was typed in, high also where the strip is too short to tell. */
export const baseExposure = z.object({
  id, value: z.number(), unit: exposureUnit, exposureSeconds: z.number().nullable(), exposureSecondsLow: z.number().nullable(), exposureSecondsHigh: z.number().nullable(),
  low: z.number().nullable(), high: z.number().nullable(), readingId: id.nullable(),
  goal: exposureGoal.nullable(), blackLightness: z.number().nullable(), values: strip.nullable(), warnings: z.array(z.object({ code: z.string(), message: z.string() })), createdAt: instant,
})
export type BaseExposureRecord = z.infer<typeof baseExposure>

const root = '/api/studios/:studio/benches' as const
export const benchEndpoints = {
  listBenches: endpoint({ method: 'GET', path: root, access: 'member', summary: 'Benches, newest first.', query: listQuery.extend({ archived: z.stringbool().optional() }), answers: { 200: listOf(bench) } }),
  createBench: endpoint({ method: 'POST', path: root, access: 'technician', summary: 'Set up a bench.', body: benchBody, answers: { 200: bench, 201: bench } }),
  bench: endpoint({ method: 'GET', path: `${root}/:bench`, access: 'member', summary: 'One bench.', answers: { 200: bench } }),
  changeBench: endpoint({ method: 'PATCH', path: `${root}/:bench`, access: 'technician', summary: 'Change it; a changed combination with readings is refused (`combination_fixed`) and a copy offered.', body: benchPatch, answers: { 200: bench } }),
  copyBench: endpoint({ method: 'POST', path: `${root}/:bench/copy`, access: 'technician', summary: 'A new bench with this one’s combination, changed where the body says.', body: benchCopy, answers: { 200: bench, 201: bench } }),
  archiveBench: endpoint({ method: 'POST', path: `${root}/:bench/archive`, access: 'technician', summary: 'Put it away; what was made with it stays.', body: z.strictObject({ revision }), answers: { 200: bench } }),
  createStarterBench: endpoint({ method: 'POST', path: '/api/studios/:studio/starter-benches', access: 'member', summary: 'The service’s own bench for a process, with an uncalibrated starter curve.', body: z.strictObject({ process }), answers: { 200: bench, 201: bench } }),
  listBaseExposures: endpoint({ method: 'GET', path: `${root}/:bench/base-exposures`, access: 'member', summary: 'The bench’s base exposures, newest first.', query: listQuery, answers: { 200: listOf(baseExposure) } }),
  createBaseExposure: endpoint({ method: 'POST', path: `${root}/:bench/base-exposures`, access: 'technician', summary: 'The base exposure from an exposure strip, as a new dated entry: from values, a reading, or a scan of the strip’s guide. 202 with the reading where a scan takes longer: send its id as `readingId` once it is ready.', body: baseExposureBody, otherBodies: scanMedia, answers: { 200: baseExposure, 201: baseExposure, 202: reading } }),
}
