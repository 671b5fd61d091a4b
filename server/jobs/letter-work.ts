import { and, asc, eq, inArray, lte, sql } from 'drizzle-orm'
import { readSettings } from '../config'
import { db } from '../db/client'
import { letters } from '../db/schema'
import { handOver, isForGood, mailIsConfigured } from '../mail/transport'

/** Each wait is four times the one before, up to 16 hours; the last attempt comes some four days after the first. */
const greatestWaitSeconds = 57_600
const attemptsInAll = 12

const waitAfter = (attempts: number): number | undefined =>
  attempts < attemptsInAll ? Math.min(greatestWaitSeconds, readSettings().LETTER_RETRY_SECONDS * 4 ** (attempts - 1)) : undefined

type Report = (event: string, details: Record<string, unknown>) => void

/** Sends the letter that is due longest. False when none is, or no mail server is configured. */
export async function sendNextLetter(report: Report): Promise<boolean> {
  if (!mailIsConfigured()) return false
  const letter = await claimLetter()
  if (!letter) return false
  try {
    await handOver({ ...letter, to: letter.toAddress })
    // What the letter's links open must not stay readable here.
    await settle(letter, { state: 'sent', sentAt: sql`now()`, text: '', html: '', lastError: null })
    report('letter.sent', { letter: letter.id, kind: letter.kind, attempts: letter.attempts })
  }
  catch (error) {
    const wait = isForGood(error) ? undefined : waitAfter(letter.attempts)
    const said = (error as Error).message.replaceAll(letter.toAddress, '…').slice(0, 500)
    await settle(letter, wait === undefined
      ? { state: 'failed', lastError: said, text: '', html: '' }
      : { state: 'waiting', lastError: said, notBefore: sql`now() + make_interval(secs => ${wait})` })
    report(wait === undefined ? 'letter.failed' : 'letter.delayed', { letter: letter.id, kind: letter.kind, attempts: letter.attempts, waitSeconds: wait, cause: said })
  }
  return true
}

type LetterRow = typeof letters.$inferSelect

/** A letter whose worker died while sending is due again after its attempt's time: better twice than never. */
async function claimLetter(): Promise<LetterRow | undefined> {
  return db().transaction(async (tx) => {
    const [next] = await tx.select({ id: letters.id }).from(letters)
      .where(and(inArray(letters.state, ['waiting', 'sending']), lte(letters.notBefore, sql`now()`)))
      .orderBy(asc(letters.notBefore)).limit(1).for('update', { skipLocked: true })
    if (!next) return undefined
    const [row] = await tx.update(letters)
      .set({ state: 'sending', attempts: sql`${letters.attempts} + 1`, notBefore: sql`now() + make_interval(secs => ${readSettings().LETTER_ATTEMPT_SECONDS})` })
      .where(eq(letters.id, next.id)).returning()
    return row
  })
}

/** Only what this attempt took up; a later attempt's outcome is not overwritten. */
async function settle({ id, attempts }: LetterRow, outcome: Omit<Partial<typeof letters.$inferInsert>, 'notBefore' | 'sentAt'> & { notBefore?: unknown, sentAt?: unknown }): Promise<void> {
  await db().update(letters).set(outcome as Partial<typeof letters.$inferInsert>).where(and(eq(letters.id, id), eq(letters.attempts, attempts), eq(letters.state, 'sending')))
}
