import { sql } from 'drizzle-orm'
import { db } from '../../db/client'
import type { DemoBenches } from './benches'

export const daysAgo = (days: number): string => new Date(Date.now() - days * 86_400_000).toISOString()

/** How many days ago the records of a bench came, oldest first. */
const ages: Record<keyof DemoBenches, Partial<Record<'base_exposures' | 'readings' | 'curves', number[]>>> = {
  cyanotype: { base_exposures: [58, 44, 13], readings: [40, 11, 10], curves: [40, 10] },
  vanDyke: { base_exposures: [4], readings: [2], curves: [2] },
  kallitype: { base_exposures: [1] },
}

/** Services date everything now. A studio that was made a second ago would not show what dates are for. */
export async function letTimePass(studioId: string, benches: DemoBenches): Promise<void> {
  for (const name of Object.keys(ages) as (keyof DemoBenches)[]) {
    for (const [table, days] of Object.entries(ages[name])) await redate(table, studioId, benches[name], days)
  }
}

async function redate(table: string, studioId: string, benchId: string, days: number[]): Promise<void> {
  // Ids rise with time, so that the order stays the one in which things came.
  const use = table === 'curves' ? sql`, in_use_since = case when in_use_since is null then null else now() - make_interval(days => age) end` : sql``
  await db().execute(sql`update ${sql.identifier(table)} set created_at = now() - make_interval(days => age)${use}
    from (select id as aged, (${sql.raw(`array[${days.join(',')}]`)})[row_number() over (order by id)] as age from ${sql.identifier(table)} where studio_id = ${studioId} and bench_id = ${benchId}) as ages
    where studio_id = ${studioId} and id = aged and age is not null`)
}
