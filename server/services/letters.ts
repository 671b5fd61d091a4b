import { eq } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import { switchableLetters, type LetterKind, type SwitchableLetter } from '#shared/schemas/letters'
import { db, type Transaction } from '../db/client'
import { letters, users } from '../db/schema'
import { sendJob } from '../jobs/queue'
import { letterHtml, letterText, type LetterContent } from '../mail/letter'
import { publicOrigin } from './origin'

/** `to` is null for students of a class, who have no address. */
export interface Letter { kind: LetterKind, to: string | null, userId?: string, studioId?: string, content: LetterContent }

/** Puts a letter into the outbox, in the transaction of what it tells of; nothing when its receiver has no address, or has switched the kind off. */
export async function postLetter(tx: Transaction, { kind, to, userId, studioId, content }: Letter): Promise<string | undefined> {
  if (to === null) return undefined
  if (userId && await isOff(tx, userId, kind)) return undefined
  const id = uuidv7()
  await tx.insert(letters).values({
    id, kind, userId, studioId, toAddress: to, state: 'waiting',
    subject: content.subject.replace(/\s+/g, ' ').slice(0, 200), text: letterText(content), html: letterHtml(content),
    messageId: `<${id}@${new URL(publicOrigin()).hostname.replace(/[[\]]/g, '')}>`,
  })
  await sendJob(tx, 'send-letter', { letterId: id })
  return id
}

async function isOff(tx: Transaction, userId: string, kind: LetterKind): Promise<boolean> {
  const [row] = await tx.select({ off: users.lettersOff }).from(users).where(eq(users.id, userId))
  return isSwitchable(kind) && (row?.off.includes(kind) ?? false)
}

const isSwitchable = (kind: LetterKind): kind is SwitchableLetter => (switchableLetters as readonly string[]).includes(kind)

export type LetterSwitches = Record<SwitchableLetter, boolean>

export async function letterSwitchesOf(userId: string): Promise<LetterSwitches> {
  const [row] = await db().select({ off: users.lettersOff }).from(users).where(eq(users.id, userId))
  return Object.fromEntries(switchableLetters.map(kind => [kind, !row!.off.includes(kind)])) as LetterSwitches
}

export async function changeLetterSwitches(userId: string, changes: Partial<LetterSwitches>): Promise<LetterSwitches> {
  await db().transaction(async (tx) => {
    const [row] = await tx.select({ off: users.lettersOff }).from(users).where(eq(users.id, userId)).for('update')
    const off = switchableLetters.filter(kind => !(changes[kind] ?? !row!.off.includes(kind)))
    await tx.update(users).set({ lettersOff: off }).where(eq(users.id, userId))
  })
  return letterSwitchesOf(userId)
}
