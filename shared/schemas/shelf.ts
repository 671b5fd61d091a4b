import { z } from 'zod'
import { process } from './benches'
import { endpoint } from './endpoint'
import { limits } from './limits'
import { id, instant, listOf, listQuery, name, newId, revision, text } from './primitives'
import { shelfFacts, type ShelfFacts, type ShelfKind } from './shelf-facts'

export type { ShelfFacts, ShelfKind } from './shelf-facts'

/** The six drawers of the shelf, by their path segment. */
export const shelfKinds = ['papers', 'sensitizers', 'films', 'inkjets', 'lamps', 'scanners'] as const satisfies ShelfKind[]

/** The facts of whichever drawer the path names: described as such, and held against that drawer's own by `factsOf`. */
const anyFacts = z.record(z.string().max(limits.nameLength), z.unknown())
  .meta({ anyOf: shelfKinds.map((kind) => { const { $schema: _, ...shape } = z.toJSONSchema(shelfFacts[kind], { io: 'input' }); return { title: kind, ...shape } }) })

/**
 * The facts of one drawer from what was sent.
 * @throws ZodError whose paths begin with `facts`, for a fact that this drawer does not have or that is out of its bounds.
 */
export const factsOf = <K extends ShelfKind>(kind: K, facts: unknown): ShelfFacts[K] =>
  z.object({ facts: shelfFacts[kind] as z.ZodType }).parse({ facts }).facts as ShelfFacts[K]

const shelfFields = { name, notes: text.optional(), facts: anyFacts.optional() }
export const shelfBody = z.strictObject({ id: newId, ...shelfFields })
/** What is left out stays; `facts` come as a whole. */
export const shelfPatch = z.strictObject({ ...shelfFields, name: name.optional(), revision })

const common = {
  id, name: z.string(), notes: z.string(),
  /** benches that stand on it and are not put away */
  benchCount: z.number().int(),
  archivedAt: instant.nullable(), createdAt: instant, revision,
}
const itemWith = <M extends z.ZodRawShape>(more: M) => z.discriminatedUnion('kind', [
  z.object({ ...common, kind: z.literal('papers'), facts: shelfFacts.papers, ...more }),
  z.object({ ...common, kind: z.literal('sensitizers'), facts: shelfFacts.sensitizers, ...more }),
  z.object({ ...common, kind: z.literal('films'), facts: shelfFacts.films, ...more }),
  z.object({ ...common, kind: z.literal('inkjets'), facts: shelfFacts.inkjets, ...more }),
  z.object({ ...common, kind: z.literal('lamps'), facts: shelfFacts.lamps, ...more }),
  z.object({ ...common, kind: z.literal('scanners'), facts: shelfFacts.scanners, ...more }),
])
export const shelfItem = itemWith({})
export type ShelfItem = z.infer<typeof shelfItem>
/** One thing with the benches that stand on it, newest first, at most 100. */
export const shelfRecord = itemWith({ benches: z.array(z.object({ id, name: z.string(), process, combinationFixed: z.boolean() })) })
export type ShelfRecord = z.infer<typeof shelfRecord>

/** Drawers are reached by name: `/papers`, `/sensitizers`, `/films`, `/inkjets`, `/lamps`, `/scanners`. */
export const shelfKind = z.enum(shelfKinds)
const path = '/api/studios/:studio/:shelf' as const
const archived = z.stringbool().optional()
export const shelfEndpoints = {
  searchShelf: endpoint({
    method: 'GET', path: '/api/studios/:studio/shelf', access: 'member', summary: 'The whole shelf, newest first, or what holds all of some words in its name, notes or facts.',
    query: listQuery.extend({ archived, words: z.string().max(limits.lineLength).optional() }), answers: { 200: listOf(shelfItem) },
  }),
  listShelf: endpoint({ method: 'GET', path, access: 'member', summary: 'One drawer of the shelf.', query: listQuery.extend({ archived }), answers: { 200: listOf(shelfItem) } }),
  createShelfItem: endpoint({ method: 'POST', path, access: 'technician', summary: 'Put something on the shelf.', body: shelfBody, answers: { 200: shelfItem, 201: shelfItem } }),
  shelfItem: endpoint({ method: 'GET', path: `${path}/:item`, access: 'member', summary: 'One thing on the shelf, and where it is used.', answers: { 200: shelfRecord } }),
  changeShelfItem: endpoint({ method: 'PATCH', path: `${path}/:item`, access: 'technician', summary: 'Correct its record; another thing is a new record.', body: shelfPatch, answers: { 200: shelfItem } }),
  archiveShelfItem: endpoint({ method: 'POST', path: `${path}/:item/archive`, access: 'technician', summary: 'Take it off the shelf; benches keep it.', body: z.strictObject({ revision }), answers: { 200: shelfItem } }),
  restoreShelfItem: endpoint({ method: 'POST', path: `${path}/:item/restore`, access: 'technician', summary: 'Put it back on the shelf.', body: z.strictObject({ revision }), answers: { 200: shelfItem } }),
}
