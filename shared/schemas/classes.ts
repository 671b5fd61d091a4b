import { z } from 'zod'
import { isCode, normaliseCode, personalCodeLength, roomCodeLength } from '../classes/codes'
import { classSteps } from '../classes/steps'
import { endpoint } from './endpoint'
import { limits } from './limits'
import { negative } from './negatives'
import { email, me, newPassword, studioMembership, user } from './people'
import { id, instant, listOf, listQuery, name, newId, revision } from './primitives'

const codeOf = (length: number, message: string) => z.string().max(40).transform(normaliseCode).refine(code => isCode(code, length), message)
export const roomCode = codeOf(roomCodeLength, `A room code has ${roomCodeLength} letters and digits. Look at the board again.`)
export const personalCode = codeOf(personalCodeLength, `A personal code has ${personalCodeLength} letters and digits. Look at your note again.`)

/** Letters, and what stands between them in names: no digits, no address. */
export const firstName = z.string().trim().min(1, 'Type your first name.').max(limits.firstNameLength)
  .transform(typed => typed.normalize('NFC').replace(/\s+/g, ' '))
  .pipe(z.string().regex(/^\p{L}[\p{L}\p{M} ’'.-]*$/u, 'Only your first name, in letters.'))

export const classRecord = z.object({
  id, name: z.string(), endsAt: instant,
  /** until when students can take their things along; then they are erased */
  takeAlongUntil: instant,
  isOver: z.boolean(), erasedAt: instant.nullable(),
  roomCode: z.string().nullable(),
  /** the address of the QR code */
  joinUrl: z.string().nullable(),
  joiningOpen: z.boolean(), studentCount: z.number().int(), handedInCount: z.number().int(), createdAt: instant, revision,
})
export type ClassRecord = z.infer<typeof classRecord>

export const classStudent = z.object({
  id, name: z.string(), step: z.enum(classSteps), joinedAt: instant,
  /** an account with an address by now */
  hasAccount: z.boolean(),
  removedAt: instant.nullable(),
  handedIn: z.array(z.object({ id, name: z.string(), revision, handedInAt: instant, mirror: z.boolean(), opaque: z.boolean() })),
})
export type ClassStudent = z.infer<typeof classStudent>
export const classBoard = classRecord.extend({ students: z.array(classStudent) })
export type ClassBoard = z.infer<typeof classBoard>

export const classBody = z.strictObject({ id: newId, name, endsAt: instant })
export const classPatch = z.strictObject({ revision, name: name.optional(), endsAt: z.union([instant, z.literal('now')]).optional(), joiningOpen: z.boolean().optional() })
export const accountBody = z.strictObject({ email, password: newPassword })

const root = '/api/studios/:studio/classes' as const
const student = `${root}/:class/students/:student` as const
export const classEndpoints = {
  listClasses: endpoint({ method: 'GET', path: root, access: 'technician', summary: 'The studio’s classes.', query: listQuery, answers: { 200: listOf(classRecord) } }),
  openClass: endpoint({ method: 'POST', path: root, access: 'technician', summary: 'Open a class with a room code, until a date.', body: classBody, answers: { 200: classRecord, 201: classRecord } }),
  classBoard: endpoint({ method: 'GET', path: `${root}/:class`, access: 'technician', summary: 'A class with its students, each at the step that their things show, and what they have handed in.', answers: { 200: classBoard } }),
  changeClass: endpoint({ method: 'PATCH', path: `${root}/:class`, access: 'technician', summary: 'Rename it, close or open the door, move its end, or end it now.', body: classPatch, answers: { 200: classRecord } }),
  renewRoomCode: endpoint({ method: 'POST', path: `${root}/:class/room-code`, access: 'technician', summary: 'Another room code; the one before leads nowhere.', answers: { 200: classRecord } }),
  removeStudent: endpoint({ method: 'DELETE', path: student, access: 'technician', summary: 'Take a student out; their things are erased after a time of grace.', answers: { 204: null } }),
  restoreStudent: endpoint({ method: 'POST', path: `${student}/restore`, access: 'technician', summary: 'Take a removed student in again.', answers: { 204: null } }),
  renewPersonalCode: endpoint({ method: 'POST', path: `${student}/personal-code`, access: 'technician', only: 'session', summary: 'Another personal code, shown this once; the student is signed out everywhere.', answers: { 201: z.object({ personalCode: z.string() }) } }),
  handIn: endpoint({ method: 'POST', path: '/api/studios/:studio/negatives/:negative/hand-in', access: 'member', summary: 'A student hands a negative in: the studio’s owners and technicians see it.', answers: { 200: negative } }),
  takeBack: endpoint({ method: 'DELETE', path: '/api/studios/:studio/negatives/:negative/hand-in', access: 'member', summary: 'Take a negative back that was handed in.', answers: { 200: negative } }),
  takeAlong: endpoint({ method: 'GET', path: '/api/studios/:studio/take-along', access: 'member', summary: 'All of one’s own in this studio as a ZIP archive: originals, settings, film files, print cards. Films that were never made are made meanwhile.', answers: { 200: ['application/zip'] } }),
  lookAtClass: endpoint({ method: 'POST', path: '/api/join/look', access: 'public', summary: 'Which class a room code opens.', body: z.strictObject({ roomCode }), answers: { 200: z.object({ className: z.string(), studioName: z.string(), endsAt: instant, takeAlongUntil: instant }) } }),
  joinClass: endpoint({ method: 'POST', path: '/api/join', access: 'public', summary: 'Join a class by its room code with a first name, with a session. The personal code is shown this once.', body: z.strictObject({ roomCode, firstName }), answers: { 201: z.object({ user, studio: studioMembership, personalCode: z.string() }) } }),
  returnToClass: endpoint({ method: 'POST', path: '/api/join/return', access: 'public', summary: 'Come back to a class by one’s personal code, with a session.', body: z.strictObject({ personalCode }), answers: { 200: me } }),
  becomeAccount: endpoint({ method: 'POST', path: '/api/me/account', access: 'fresh-session', summary: 'A student asks for an account with address and password; it counts once the letter’s link was followed.', body: accountBody, answers: { 202: null } }),
}
