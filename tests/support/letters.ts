import { randomUUID } from 'node:crypto'
import { setTimeout as sleep } from 'node:timers/promises'
import { sql } from './database'
import { newStudio, type Agent } from './studio'

export interface StoredLetter { id: string, kind: string, subject: string, text: string, html: string, message_id: string, state: string }

/** The newest letter to an address, once it is in the outbox. */
export async function letterTo(address: string, kind?: string): Promise<StoredLetter> {
  for (let tries = 0; tries < 200; tries++) {
    const [letter] = await sql('select * from letters where lower(to_address) = lower($1) and ($2::text is null or kind = $2) order by id desc limit 1', [address, kind ?? null])
    if (letter) return letter as unknown as StoredLetter
    await sleep(25)
  }
  throw new Error(`No letter ${kind ?? ''} to ${address}`)
}

/** What a letter's link carries behind its #. */
export function secretIn({ text }: { text: string }): string {
  const [, secret] = /#([\w-]{43})$/m.exec(text) ?? []
  if (!secret) throw new Error(`No link in: ${text}`)
  return secret
}

export async function resetLinkFor(agent: Agent, { email }: { email: string }): Promise<string> {
  const answer = await agent.post('/api/auth/reset-requests', { email })
  if (answer.status !== 202) throw new Error(`Asking for a reset answered ${answer.status}: ${answer.text}`)
  return secretIn(await letterTo(email, 'password-reset'))
}

/** An invitation into a studio, by default a new one, and what its letter's link carries. */
export async function newInvitation({ host, role = 'technician', email = `${randomUUID()}@ropeworks.example` }: { host?: Awaited<ReturnType<typeof newStudio>>, role?: string, email?: string } = {}) {
  const studio = host ?? await newStudio('Weir House')
  const answer = await studio.agent.post(`${studio.root}/invitations`, { email, role })
  if (answer.status !== 201) throw new Error(`Inviting answered ${answer.status}: ${answer.text}`)
  return { host: studio, email, id: answer.body.id as string, token: secretIn(await letterTo(email, 'invitation')) }
}
