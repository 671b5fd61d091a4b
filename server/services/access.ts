import { and, eq } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { roles, type Role } from '#shared/schemas/people'
import { db, type Queryable } from '../db/client'
import { memberships, studios } from '../db/schema'

/** Who calls: signed in by a session, or by a token that may be bound to a studio and to a role at most. */
export interface Person {
  id: string
  name: string
  email: string
  session?: { id: string, freshAt: Date }
  token?: { studioId: string | null, roleCeiling: Role | null }
}

/** A person inside a studio: every query of studio-owned records starts from one of these. */
export interface StudioAccess { id: string, slug: string, name: string, role: Role, personId: string }

export const hasRole = (role: Role, least: Role): boolean => roles.indexOf(role) >= roles.indexOf(least)

const uuidShape = /^[0-9a-f]{8}-(?:[0-9a-f]{4}-){3}[0-9a-f]{12}$/i

/** The person's access to a studio, or undefined where they are no member of it. */
export async function accessTo(personId: string, idOrSlug: string, on: Queryable = db()): Promise<StudioAccess | undefined> {
  const isId = uuidShape.test(idOrSlug)
  if (!isId && !/^[a-z0-9-]{1,80}$/.test(idOrSlug)) return undefined
  const [row] = await on.select({ id: studios.id, slug: studios.slug, name: studios.name, role: memberships.role, personId: memberships.userId })
    .from(studios).innerJoin(memberships, and(eq(memberships.studioId, studios.id), eq(memberships.userId, personId)))
    .where(isId ? eq(studios.id, idOrSlug) : eq(studios.slug, idOrSlug))
  return row
}

/** Someone else's studio answers 404, one's own with too low a role 403. */
export async function enterStudio(person: Pick<Person, 'id' | 'token'>, idOrSlug: string, least: Role): Promise<StudioAccess> {
  const access = withinToken(person.token, await accessTo(person.id, idOrSlug))
  if (!access) throw new ComputeError('not_found', 'There is no such studio, or you are not in it.')
  requireRole(access, least)
  return access
}

/** What a token may see of a studio: nothing where it is bound to another, else with its role at most. */
export function withinToken<Access extends { id: string, role: Role }>(token: Person['token'], access: Access | undefined): Access | undefined {
  if (!token || !access) return access
  if (token.studioId !== null && token.studioId !== access.id) return undefined
  return token.roleCeiling !== null && hasRole(access.role, token.roleCeiling) ? { ...access, role: token.roleCeiling } : access
}

export function requireRole(access: StudioAccess, least: Role): void {
  if (!hasRole(access.role, least)) throw new ComputeError('role_too_low', `Only ${least === 'owner' ? 'an owner' : 'a technician or an owner'} of this studio may do that.`)
}
