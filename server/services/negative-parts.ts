import { and, eq, inArray, isNotNull, or, type SQL } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { db, type Queryable } from '../db/client'
import { benches, curves, films, inkjets, negatives, photos } from '../db/schema'
import { hasRole, type StudioAccess } from './access'

export type NegativeRow = typeof negatives.$inferSelect
type CurveRow = typeof curves.$inferSelect

/** A negative with all that it rests on. */
export interface NegativeParts {
  negative: NegativeRow
  photo: typeof photos.$inferSelect
  bench: typeof benches.$inferSelect
  /** the bench's film and inkjet, as far as the shelf knows them */
  film: Pick<typeof films.$inferSelect, 'facts'> | null
  inkjet: Pick<typeof inkjets.$inferSelect, 'name' | 'facts'> | null
  curve: CurveRow
  /** the bench's curve in use, whichever the negative was made with */
  inUse: Pick<CurveRow, 'id' | 'version' | 'inUseSince'> | undefined
}

/** A negative shows its photo, so it is its maker's alone, */
export const ownedBy = (studio: StudioAccess) => and(eq(negatives.studioId, studio.id), eq(negatives.createdBy, studio.personId))
/** but owners and technicians see it while it is handed in to a class. */
const seenBy = (studio: StudioAccess) => hasRole(studio.role, 'technician') ? or(ownedBy(studio), and(eq(negatives.studioId, studio.id), isNotNull(negatives.handedInAt))) : ownedBy(studio)

/** Reads negatives with their parts, each curve once: its table is large, and many negatives share it. */
export async function readParts(where: SQL | undefined, order: SQL, limit: number, on: Queryable = db()): Promise<NegativeParts[]> {
  const rows = await on.select({ negative: negatives, photo: photos, bench: benches, film: { facts: films.facts }, inkjet: { name: inkjets.name, facts: inkjets.facts } }).from(negatives)
    .innerJoin(photos, and(eq(photos.studioId, negatives.studioId), eq(photos.id, negatives.photoId)))
    .innerJoin(benches, and(eq(benches.studioId, negatives.studioId), eq(benches.id, negatives.benchId)))
    .leftJoin(films, and(eq(films.studioId, benches.studioId), eq(films.id, benches.filmId)))
    .leftJoin(inkjets, and(eq(inkjets.studioId, benches.studioId), eq(inkjets.id, benches.inkjetId)))
    .where(where).orderBy(order).limit(limit)
  if (rows.length === 0) return []
  const { studioId } = rows[0]!.negative
  const known = await on.select().from(curves).where(and(eq(curves.studioId, studioId), inArray(curves.id, [...new Set(rows.map(r => r.negative.curveId))])))
  const inUse = await on.select({ id: curves.id, benchId: curves.benchId, version: curves.version, inUseSince: curves.inUseSince }).from(curves)
    .where(and(eq(curves.studioId, studioId), eq(curves.state, 'in-use'), inArray(curves.benchId, [...new Set(rows.map(r => r.bench.id))])))
  return rows.map(row => ({ ...row, curve: known.find(c => c.id === row.negative.curveId)!, inUse: inUse.find(c => c.benchId === row.bench.id) }))
}

/** One negative that this person may see; an archived one, or somebody else's, is not there. */
export async function requireParts(studio: StudioAccess, id: string, on: Queryable = db()): Promise<NegativeParts> {
  const [parts] = await readParts(and(seenBy(studio), eq(negatives.id, id)), negatives.id.getSQL(), 1, on)
  if (!parts || parts.negative.archivedAt) throw new ComputeError('not_found', 'There is no such negative.')
  return parts
}

/** The same for who changes it: to see it is not enough. */
export async function requireOwnParts(studio: StudioAccess, id: string, on: Queryable = db()): Promise<NegativeParts> {
  const parts = await requireParts(studio, id, on)
  if (parts.negative.createdBy !== studio.personId) throw new ComputeError('role_too_low', 'This negative was handed in for you to look at and to print. It stays its student’s own.')
  return parts
}
