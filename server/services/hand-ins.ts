import { and, eq, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import type { Negative } from '#shared/schemas/negatives'
import { db } from '../db/client'
import { negatives } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { hintBoard } from './class-hints'
import { requireOwnParts } from './negative-parts'
import { negativeOf, tellNegative } from './negatives'

/** A student shows a negative to the studio's owners and technicians. */
export const handIn = (studio: StudioAccess, negativeId: string): Promise<Negative> => setHandedIn(studio, negativeId, true)

/** And hides it again, while the class lasts. */
export const takeBack = (studio: StudioAccess, negativeId: string): Promise<Negative> => setHandedIn(studio, negativeId, false)

async function setHandedIn(studio: StudioAccess, id: string, handedIn: boolean): Promise<Negative> {
  await db().transaction(async (tx) => {
    const { negative } = await requireOwnParts(studio, id, tx)
    if (!studio.student) throw new ComputeError('wrong_state', 'Only students of a class hand negatives in.')
    if ((negative.handedInAt !== null) === handedIn) return
    // No new revision: what the negative is stays the same, and an editor that stands open goes on.
    const [row] = await tx.update(negatives).set({ handedInAt: handedIn ? sql`now()` : null }).where(and(eq(negatives.studioId, studio.id), eq(negatives.id, id))).returning()
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: handedIn ? 'class.handed-in' : 'class.taken-back', recordId: id, details: { class: studio.student.classId } })
    await tellNegative(tx, row!)
    await hintBoard(tx, { studioId: studio.id, id: studio.student.classId })
  })
  return await negativeOf(studio, id)
}
