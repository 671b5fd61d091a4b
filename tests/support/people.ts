import type { Role } from '../../shared/schemas/people'
import { sql } from './database'
import { newStudio } from './studio'

/** Signs a new person up and takes them into a studio in a role. */
export async function newPersonIn(studioId: string, role: Role) {
  const person = await newStudio('A studio of one’s own')
  await setRole(studioId, person.ids.user, role)
  return person
}

export async function setRole(studioId: string, userId: string, role: Role | null): Promise<void> {
  if (role === null) await sql('delete from memberships where studio_id = $1 and user_id = $2', [studioId, userId])
  else await sql('insert into memberships (studio_id, user_id, role) values ($1, $2, $3) on conflict (studio_id, user_id) do update set role = excluded.role', [studioId, userId, role])
}
