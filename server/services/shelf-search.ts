import { and, eq, isNotNull, isNull, sql, type SQL } from 'drizzle-orm'
import { unionAll } from 'drizzle-orm/pg-core'
import { shelfKinds, type ShelfKind } from '#shared/schemas/shelf'
import { db } from '../db/client'
import type { StudioAccess } from './access'
import { keyset, toPage, type Page } from './paging'
import { drawers, shelfView } from './shelf'
import { benchCounts } from './shelf-uses'

/** The whole shelf in one list, or what holds each of the words somewhere in its name, notes or facts. */
export async function searchShelf(studio: StudioAccess, { words, archived, ...page }: Page & { words?: string, archived?: boolean }) {
  const wanted = wordsOf(words ?? '')
  const [first, second, ...others] = shelfKinds.map(kind => drawerQuery(studio, kind, { wanted, archived, page }))
  const rows = await unionAll(first!, second!, ...others).orderBy(sql`id desc`).limit(page.limit + 1)
  const counts = await benchCounts(db(), studio.id, rows.map(row => row.id))
  return toPage(rows, page, ({ kind, ...row }) => shelfView(kind, row, counts.get(row.id) ?? 0))
}

/** Small letters, apart at blanks; `0,35` finds 0.35. */
export const wordsOf = (typed: string): string[] => typed.toLowerCase().replaceAll(/(\d),(\d)/g, '$1.$2').split(/[\s,;]+/).filter(Boolean).slice(0, 12)

function drawerQuery(studio: StudioAccess, kind: ShelfKind, { wanted, archived, page }: { wanted: string[], archived?: boolean, page: Page }) {
  const drawer = drawers[kind]
  const { id, name, notes, facts, archivedAt, createdAt, revision } = drawer
  const found = wanted.map(word => sql`strpos(${haystack(kind)}, ${word}) > 0`)
  return db().select({ kind: sql<ShelfKind>`${kind}::text`.as('kind'), id, name, notes, facts, archivedAt, createdAt, revision }).from(drawer)
    .where(and(eq(drawer.studioId, studio.id), archived ? isNotNull(archivedAt) : isNull(archivedAt), keyset(id, page).after, ...found))
}

/** All that is written of a thing, its drawer's name with it, the facts by their values and not by their keys. */
function haystack(kind: ShelfKind): SQL {
  const { name, notes, facts } = drawers[kind]
  const values = sql`(select string_agg(fact #>> '{}', ' ') from jsonb_path_query(${facts}, 'strict $.**') fact where jsonb_typeof(fact) in ('string', 'number'))`
  return sql`lower(concat_ws(' ', ${kind}::text, ${name}, ${notes}, ${values}))`
}
