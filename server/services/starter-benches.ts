import { and, eq, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import { starterResponse } from '#shared/calibration/starter'
import type { Process } from '#shared/schemas/benches'
import type { Transaction } from '../db/client'
import { benches, curves } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { benchDefaults, type BenchRow } from './benches'
import { bodyHashOf } from './creation'
import { hint } from './hints'

const processNames: Record<Process, string> = {
  'cyanotype': 'Cyanotype', 'van-dyke': 'Van Dyke brown', 'salt': 'Salt print', 'kallitype': 'Kallitype',
  'platinum-palladium': 'Platinum/palladium', 'gum': 'Gum', 'carbon': 'Carbon', 'other': 'Other',
}

/**
 * The service's own bench of a process in this studio, made when it is first asked for, with an uncalibrated curve in use.
 * However many ask at once, there is one: whoever comes second waits for the first one's transaction and takes its bench.
 * Throws `no_starter_curve` for a process without one.
 */
export async function starterBench(tx: Transaction, studio: StudioAccess, process: Process): Promise<{ created: boolean, bench: BenchRow }> {
  const starter = starterResponse(process)
  const id = uuidv7()
  const [made] = await tx.insert(benches)
    .values({ studioId: studio.id, id, name: `${processNames[process]}, starter`, process, ...benchDefaults({ process }), starter: true, bodyHash: bodyHashOf({ process }) })
    .onConflictDoNothing({ target: [benches.studioId, benches.process], where: sql`${benches.starter}` }).returning()
  if (!made) return { created: false, bench: await starterOf(tx, studio.id, process) }
  await tx.insert(curves).values({
    studioId: studio.id, id: uuidv7(), benchId: id, version: 1, state: 'in-use', aim: 'even-lightness', calibrated: false,
    ...starter, bodyHash: bodyHashOf({ starter: process }), inUseSince: sql`now()`,
  })
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'benches.created', recordId: id, details: { starter: process } })
  await hint(tx, { studioId: studio.id, topic: 'benches', id })
  return { created: true, bench: made }
}

async function starterOf(tx: Transaction, studioId: string, process: Process): Promise<BenchRow> {
  return (await tx.select().from(benches).where(and(eq(benches.studioId, studioId), eq(benches.process, process), benches.starter)))[0]!
}
