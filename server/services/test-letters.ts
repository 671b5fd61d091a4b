import { and, eq } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { db } from '../db/client'
import { letters } from '../db/schema'
import { testLetter } from '../mail/letters'
import { mailIsConfigured } from '../mail/transport'
import type { StudioAccess } from './access'
import { postLetter } from './letters'
import { requireFound } from './revisions'

/** A letter to oneself: its state tells whether mail leaves this installation. */
export async function postTestLetter(studio: StudioAccess, person: { id: string, email: string | null }): Promise<string> {
  if (!mailIsConfigured()) throw new ComputeError('unavailable', 'No mail server is set up for this installation. Whoever runs it sets SMTP_URL.')
  const id = await db().transaction(tx => postLetter(tx, { kind: 'test', to: person.email, userId: person.id, studioId: studio.id, content: testLetter({ studioName: studio.name }) }))
  return id!
}

export async function testLetterState(studioId: string, id: string) {
  const [row] = await db().select({ id: letters.id, state: letters.state, attempts: letters.attempts, lastError: letters.lastError }).from(letters)
    .where(and(eq(letters.studioId, studioId), eq(letters.id, id), eq(letters.kind, 'test')))
  return requireFound(row)
}
