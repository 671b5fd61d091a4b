import { v7 as uuidv7 } from 'uuid'
import type { Role } from '#shared/schemas/people'
import { readSettings } from '../../config'
import { db, type Transaction } from '../../db/client'
import { memberships, users } from '../../db/schema'
import { accessTo, type StudioAccess } from '../../services/access'
import { recordEvent } from '../../services/audit'
import { inventedDomain } from '../../services/demo-removal'
import { invite } from '../../services/invitations'
import { hashPassword } from '../../services/passwords'
import { openStudio } from '../../services/people'
import { createToken } from '../../services/tokens'

const studioName = 'Rope Works Print Studio'
const cast = { owner: 'Ines Marlow', technician: 'Tobias Reen', member: 'Ada Quill' } as const satisfies Record<Role, string>
export type DemoPeople = Record<Role, StudioAccess>

/** The studio with somebody in each role, in one transaction; nobody is asked by letter, since nobody is there to read it. */
export async function openDemoStudio(password: string): Promise<DemoPeople> {
  const passwordHash = await hashPassword(password)
  const { studioId, ids } = await db().transaction(async (tx) => {
    const ids = { owner: await addPerson(tx, 'owner', passwordHash), technician: await addPerson(tx, 'technician', passwordHash), member: await addPerson(tx, 'member', passwordHash) }
    const { id: studioId } = await openStudio(tx, ids.owner, studioName, true)
    for (const role of ['technician', 'member'] as const) {
      await tx.insert(memberships).values({ studioId, userId: ids[role], role })
      await recordEvent(tx, { studioId, userId: ids[role], kind: 'person.joined', recordId: ids[role], details: { role } })
    }
    return { studioId, ids }
  })
  const enter = async (role: Role) => (await accessTo(ids[role], studioId))!
  return { owner: await enter('owner'), technician: await enter('technician'), member: await enter('member') }
}

async function addPerson(tx: Transaction, role: Role, passwordHash: string): Promise<string> {
  const id = uuidv7()
  await tx.insert(users).values({ id, name: cast[role], email: `${role}${inventedDomain}`, passwordHash })
  await recordEvent(tx, { userId: id, kind: 'person.registered', recordId: id })
  return id
}

export async function inviteAndHandOutToken({ owner, technician }: DemoPeople): Promise<void> {
  // A real mail server would only send this letter back: nobody lives at a reserved domain.
  const mailServer = readSettings().SMTP_URL
  if (mailServer && new URL(mailServer).hostname === '127.0.0.1') await invite(owner, { id: owner.personId, name: cast.owner }, { email: `paula.brandt${inventedDomain}`, role: 'member' })
  await createToken(technician.personId, { name: 'Computer beside the inkjet', studioId: technician.id, roleCeiling: 'technician', expiresAt: new Date(Date.now() + 180 * 86_400_000).toISOString() })
}
