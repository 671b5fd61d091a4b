import { and, eq, isNull, or, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { roles, type Role } from '#shared/schemas/people'
import { db, type Queryable } from '../db/client'
import { classes, classStudents, memberships, studios } from '../db/schema'
import { isOver, isPast, isStudent, takeAlongUntil } from './class-times'

/** Who calls: signed in by a session, or by a token that may be bound to a studio and to a role at most. */
export interface Person {
  id: string
  name: string
  /** null for students of a class */
  email: string | null
  session?: { id: string, freshAt: Date }
  token?: { studioId: string | null, roleCeiling: Role | null }
}

/** A person inside a studio: every query of studio-owned records starts from one of these. */
export interface StudioAccess {
  id: string
  slug: string
  name: string
  role: Role
  personId: string
  /** the class that the person is here for, and for no longer */
  student?: { classId: string, endsAt: Date }
}

export const hasRole = (role: Role, least: Role): boolean => roles.indexOf(role) >= roles.indexOf(least)

const uuidShape = /^[0-9a-f]{8}-(?:[0-9a-f]{4}-){3}[0-9a-f]{12}$/i

/** The person's access to a studio, or undefined where they are no member of it; a student's ends with the time to take things along. */
export async function accessTo(personId: string, idOrSlug: string, on: Queryable = db()): Promise<StudioAccess | undefined> {
  const isId = uuidShape.test(idOrSlug)
  if (!isId && !/^[a-z0-9-]{1,80}$/.test(idOrSlug)) return undefined
  const [row] = await on.select({ id: studios.id, slug: studios.slug, name: studios.name, role: memberships.role, personId: memberships.userId, classId: classes.id, endsAt: classes.endsAt })
    .from(studios).innerJoin(memberships, and(eq(memberships.studioId, studios.id), eq(memberships.userId, personId)))
    .leftJoin(classStudents, and(eq(classStudents.studioId, studios.id), eq(classStudents.id, personId), isStudent))
    .leftJoin(classes, and(eq(classes.studioId, classStudents.studioId), eq(classes.id, classStudents.classId)))
    .where(and(isId ? eq(studios.id, idOrSlug) : eq(studios.slug, idOrSlug), or(isNull(classes.id), sql`not ${isPast()}`)))
  if (!row) return undefined
  const { classId, endsAt, ...access } = row
  return classId && endsAt ? { ...access, student: { classId, endsAt } } : access
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

/** Students of a class have no address, and nothing that outlasts the class. */
export function requireAccount(person: Person): asserts person is Person & { email: string } {
  if (person.email === null) throw new ComputeError('account_required', 'This takes an account with an e-mail address and a password. Turn yours into one first: “Take along” on your class’s page shows how.')
}

/** When a class is over, its students can look at everything and take it along, and change nothing. */
export function requireOpenClass({ student }: StudioAccess): void {
  if (!student || !isOver(student.endsAt)) return
  const until = new Intl.DateTimeFormat('en', { dateStyle: 'long', timeZone: 'UTC' }).format(takeAlongUntil(student.endsAt))
  throw new ComputeError('class_over', `Your class is over. You can look at everything and take it along until ${until}; nothing can be changed any more.`)
}

export function requireRole(access: StudioAccess, least: Role): void {
  if (!hasRole(access.role, least)) throw new ComputeError('role_too_low', `Only ${least === 'owner' ? 'an owner' : 'a technician or an owner'} of this studio may do that.`)
}
