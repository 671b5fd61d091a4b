import { z } from 'zod'
import { endpoint } from './endpoint'
import { id, instant, listOf, listQuery, name, newId, revision, text } from './primitives'

/** The six drawers of the shelf, by their path segment. */
export const shelfKinds = ['papers', 'sensitizers', 'films', 'inkjets', 'lamps', 'scanners'] as const
export type ShelfKind = typeof shelfKinds[number]

const shelfFields = { name, notes: text.optional() }
export const shelfBody = z.strictObject({ id: newId, ...shelfFields })
export const shelfPatch = z.strictObject({ name: name.optional(), notes: text.optional(), revision })
export const shelfItem = z.object({ id, name: z.string(), notes: z.string(), archivedAt: instant.nullable(), createdAt: instant, revision })
export type ShelfItem = z.infer<typeof shelfItem>

/** Drawers are reached by name: `/papers`, `/sensitizers`, `/films`, `/inkjets`, `/lamps`, `/scanners`. */
export const shelfKind = z.enum(shelfKinds)
const path = '/api/studios/:studio/:shelf' as const
export const shelfEndpoints = {
  listShelf: endpoint({ method: 'GET', path, access: 'member', summary: 'One drawer of the shelf.', query: listQuery.extend({ archived: z.stringbool().optional() }), answers: { 200: listOf(shelfItem) } }),
  createShelfItem: endpoint({ method: 'POST', path, access: 'technician', summary: 'Put something on the shelf.', body: shelfBody, answers: { 200: shelfItem, 201: shelfItem } }),
  shelfItem: endpoint({ method: 'GET', path: `${path}/:item`, access: 'member', summary: 'One thing on the shelf.', answers: { 200: shelfItem } }),
  changeShelfItem: endpoint({ method: 'PATCH', path: `${path}/:item`, access: 'technician', summary: 'Change its record.', body: shelfPatch, answers: { 200: shelfItem } }),
  archiveShelfItem: endpoint({ method: 'POST', path: `${path}/:item/archive`, access: 'technician', summary: 'Take it off the shelf; benches keep it.', body: z.strictObject({ revision }), answers: { 200: shelfItem } }),
}
