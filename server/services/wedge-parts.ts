import { and, eq, type SQL } from 'drizzle-orm'
import { parseIdentity } from '#shared/calibration/wedge/identity-code'
import { db, type Queryable } from '../db/client'
import { benches, curves, wedges } from '../db/schema'
import { requireFound } from './revisions'

export type WedgeRow = typeof wedges.$inferSelect

/** A wedge with what else decides its film: its bench, and the curve that it is printed through. */
export interface WedgeParts {
  wedge: WedgeRow
  bench: Pick<typeof benches.$inferSelect, 'name' | 'process' | 'mirror'>
  curve: Pick<typeof curves.$inferSelect, 'version' | 'response' | 'aim'> | null
}

export async function readWedgeParts(on: Queryable, where: SQL | undefined, order?: SQL, limit = 1): Promise<WedgeParts[]> {
  const rows = on.select({
    wedge: wedges, bench: { name: benches.name, process: benches.process, mirror: benches.mirror },
    curve: { version: curves.version, response: curves.response, aim: curves.aim },
  }).from(wedges)
    .innerJoin(benches, and(eq(benches.studioId, wedges.studioId), eq(benches.id, wedges.benchId)))
    .leftJoin(curves, and(eq(curves.studioId, wedges.studioId), eq(curves.id, wedges.throughCurveId)))
    .where(where).limit(limit)
  return await (order ? rows.orderBy(order) : rows)
}

/** Also one that was put away: its prints and readings stay. */
export async function requireWedgeParts(studioId: string, id: string, on: Queryable = db()): Promise<WedgeParts> {
  return requireFound((await readWedgeParts(on, and(eq(wedges.studioId, studioId), eq(wedges.id, id))))[0])
}

export async function findWedge(on: Queryable, studioId: string, id: string): Promise<WedgeRow | undefined> {
  return (await on.select().from(wedges).where(and(eq(wedges.studioId, studioId), eq(wedges.id, id))))[0]
}

/** The studio's wedge with this code, as it was read from a print or typed in; undefined also where the text is no code. */
export async function findWedgeByCode(on: Queryable, studioId: string, code: string): Promise<WedgeRow | undefined> {
  const identity = parseIdentity(code)
  if (!identity) return undefined
  return (await on.select().from(wedges).where(and(eq(wedges.studioId, studioId), eq(wedges.code, identity))))[0]
}
