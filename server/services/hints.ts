import { sql } from 'drizzle-orm'
import type { Role } from '#shared/schemas/people'
import type { Queryable } from '../db/client'

export const hintChannel = 'emulside_hints'
export const hintTopics = ['papers', 'sensitizers', 'films', 'inkjets', 'lamps', 'scanners', 'benches', 'base-exposures', 'wedges', 'wedge-prints', 'readings', 'curves', 'walk', 'tablets', 'film-densities', 'scanner-profiles', 'photos', 'negatives', 'renders', 'people', 'classes', 'studio'] as const
export type HintTopic = typeof hintTopics[number]

/** Says that a record has changed, without its content. */
export interface Hint {
  studioId: string
  topic: HintTopic
  id: string
  revision?: number
  /** only this person may know of the record; absent: everybody in the studio */
  onlyFor?: string
  /** only people with this role or a higher one may know of the record */
  leastRole?: Role
}

/** Sent to all processes when, and only if, the surrounding transaction commits. */
export async function hint(on: Queryable, { studioId, topic, id, revision = 1, onlyFor, leastRole }: Hint): Promise<void> {
  await on.execute(sql`select pg_notify(${hintChannel}, ${JSON.stringify({ studioId, topic, id, revision, onlyFor, leastRole })})`)
}
