import { and, eq } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { baseExposureValue } from '#shared/schemas/benches'
import { db, type Transaction } from '../db/client'
import { baseExposures, benches } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'

/** A dated entry; the newest counts, the ones before stay readable. */
export async function addBaseExposure(tx: Transaction, studio: StudioAccess, benchId: string, { value, unit }: z.infer<typeof baseExposureValue>): Promise<void> {
  const id = uuidv7()
  await tx.insert(baseExposures).values({ studioId: studio.id, id, benchId, value, unit, createdBy: studio.personId })
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'base-exposures.created', recordId: id, details: { benchId, value, unit } })
  await hint(tx, { studioId: studio.id, topic: 'base-exposures', id })
}

export async function listBaseExposures(studio: StudioAccess, benchId: string, page: Page) {
  const [bench] = await db().select({ id: benches.id }).from(benches).where(and(eq(benches.studioId, studio.id), eq(benches.id, benchId)))
  if (!bench) throw new ComputeError('not_found', 'There is no such bench.')
  const { after, order, take } = keyset(baseExposures.id, page)
  const rows = await db().select().from(baseExposures).where(and(eq(baseExposures.studioId, studio.id), eq(baseExposures.benchId, benchId), after)).orderBy(order).limit(take)
  const inSeconds = (row: typeof rows[number], figure: number | null) => row.unit === 's' ? figure : null
  return toPage(rows, page, row => ({
    id: row.id, value: row.value, unit: row.unit, createdAt: row.createdAt.toISOString(),
    exposureSeconds: inSeconds(row, row.value), exposureSecondsLow: inSeconds(row, row.low), exposureSecondsHigh: inSeconds(row, row.high),
  }))
}
