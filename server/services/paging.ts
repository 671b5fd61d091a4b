import { desc, lt, type AnyColumn, type SQL } from 'drizzle-orm'

export interface Page { cursor?: string, limit: number }

/** Keyset paging by id (version 7: in order of making), newest first: pass on to `where` and `orderBy`, and fetch `limit + 1` rows. */
export const keyset = (id: AnyColumn, page: Page): { after: SQL | undefined, order: SQL, take: number } =>
  ({ after: page.cursor ? lt(id, page.cursor) : undefined, order: desc(id), take: page.limit + 1 })

/** Cuts the one row too many off and tells whether there was one. */
export function toPage<Row extends { id: string }, Item>(rows: Row[], page: Page, show: (row: Row) => Item): { items: Item[], nextCursor: string | null } {
  const shown = rows.slice(0, page.limit)
  return { items: shown.map(show), nextCursor: rows.length > page.limit ? shown.at(-1)!.id : null }
}
