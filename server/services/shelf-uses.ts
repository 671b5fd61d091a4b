import { and, desc, eq, inArray, isNull, or, sql } from 'drizzle-orm'
import type { ShelfRecord } from '#shared/schemas/shelf'
import type { Queryable } from '../db/client'
import { benches, readings, wedgePrints } from '../db/schema'

/** At most so many benches are told of one thing. */
const benchesTold = 100

/** How many benches that are not put away stand on each of these things. */
export async function benchCounts(on: Queryable, studioId: string, itemIds: string[]): Promise<Map<string, number>> {
  if (itemIds.length === 0) return new Map()
  const { rows } = await on.execute<{ item: string, count: number }>(sql`
    select item, count(*)::int as count
    from benches, unnest(array[paper_id, sensitizer_id, film_id, inkjet_id, lamp_id]) as item
    where studio_id = ${studioId} and archived_at is null and item in ${itemIds} group by item`)
  return new Map(rows.map(({ item, count }) => [item, count]))
}

export async function benchesOn(on: Queryable, studioId: string, itemId: string): Promise<ShelfRecord['benches']> {
  const stands = or(eq(benches.paperId, itemId), eq(benches.sensitizerId, itemId), eq(benches.filmId, itemId), eq(benches.inkjetId, itemId), eq(benches.lampId, itemId))
  const rows = await on.select({ id: benches.id, name: benches.name, process: benches.process }).from(benches)
    .where(and(eq(benches.studioId, studioId), isNull(benches.archivedAt), stands)).orderBy(desc(benches.id)).limit(benchesTold)
  const printed = await printedBenches(on, studioId, rows.map(row => row.id))
  return rows.map(row => ({ ...row, combinationFixed: printed.has(row.id) }))
}

/** Those of these benches that have wedge prints or readings: their combination stays. */
export async function printedBenches(on: Queryable, studioId: string, benchIds: string[]): Promise<Set<string>> {
  if (benchIds.length === 0) return new Set()
  const of = (table: typeof readings | typeof wedgePrints) => on.selectDistinct({ id: table.benchId }).from(table).where(and(eq(table.studioId, studioId), inArray(table.benchId, benchIds)))
  return new Set([...await of(readings), ...await of(wedgePrints)].map(row => row.id))
}
