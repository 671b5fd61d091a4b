import { randomUUID } from 'node:crypto'
import { inDays, newClass, newClassWithStudent, newStudent } from '../../support/classes'
import { newNegative } from '../../support/negatives'
import type { RouteCase } from './route-case'
import type { World } from './world'

const classes = 'studios/[studio]/classes'
const negative = 'studios/[studio]/negatives/[negative]'
const account = () => ({ email: `${randomUUID()}@ropeworks.example`, password: 'a long enough one' })

const ofNew = async ({ owner }: World) => ({ params: { class: (await newClass(owner)).id } })
const ofNewStudent = async ({ owner }: World) => {
  const open = await newClass(owner)
  return { params: { class: open.id, student: (await newStudent(open)).id } }
}
/** A student of the world's studio, and what another student can't do with their negative follows from who calls. */
const studentIn = async ({ owner }: World) => await newStudent(await newClass(owner))
let handing: Awaited<ReturnType<typeof studentIn>>
const negativeOfStudent = async (world: World) => {
  handing ??= await studentIn(world)
  return { params: { negative: (await newNegative({ agent: handing.agent, root: world.owner.root })).id } }
}

export const classCases: RouteCase[] = [
  { file: `${classes}/index.get.ts`, row: 'listClasses', good: () => ({}) },
  {
    file: `${classes}/index.post.ts`, row: 'openClass', good: () => ({ json: { name: 'Blue afternoon', endsAt: inDays(7) }, status: 201 }),
    bad: [
      { why: 'an end in the past', call: () => ({ json: { name: 'Blue afternoon', endsAt: inDays(-1) }, status: 422, code: 'invalid_input' }) },
      { why: 'an end years ahead', call: () => ({ json: { name: 'Blue afternoon', endsAt: inDays(800) }, status: 422, code: 'invalid_input' }) },
      { why: 'no name', call: () => ({ json: { name: ' ', endsAt: inDays(7) }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${classes}/[class]/index.get.ts`, row: 'classBoard', good: ofNew },
  {
    file: `${classes}/[class]/index.patch.ts`, row: 'changeClass', good: async world => ({ ...await ofNew(world), json: { revision: 1, endsAt: inDays(9) } }),
    bad: [
      { why: 'an old revision', call: () => ({ json: { revision: 7, name: 'Blue evening' }, status: 409, code: 'stale_revision' }) },
      { why: 'an end in the past', call: () => ({ json: { revision: 1, endsAt: inDays(-2) }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${classes}/[class]/room-code.post.ts`, row: 'renewRoomCode', good: ofNew },
  { file: `${classes}/[class]/students/[student]/index.delete.ts`, row: 'removeStudent', good: async world => ({ ...await ofNewStudent(world), status: 204 }) },
  {
    file: `${classes}/[class]/students/[student]/restore.post.ts`, row: 'restoreStudent',
    good: async (world) => {
      const { params } = await ofNewStudent(world)
      await world.owner.agent.delete(`${world.owner.root}/classes/${params.class}/students/${params.student}`)
      return { params, status: 204 }
    },
  },
  { file: `${classes}/[class]/students/[student]/personal-code.post.ts`, row: 'renewPersonalCode', good: async world => ({ ...await ofNewStudent(world), status: 201 }) },
  { file: `${negative}/hand-in.post.ts`, row: 'handIn', caller: async world => (await negativeOfStudent(world), handing.agent), good: negativeOfStudent },
  { file: `${negative}/hand-in.delete.ts`, row: 'takeBack', caller: async world => (await negativeOfStudent(world), handing.agent), good: negativeOfStudent },
  { file: 'studios/[studio]/take-along.get.ts', row: 'takeAlong', caller: async world => (await studentIn(world)).agent, good: () => ({}) },
  {
    file: 'join/look.post.ts', row: 'lookAtClass', good: async ({ owner }) => ({ json: { roomCode: (await newClass(owner)).roomCode } }),
    bad: [
      { why: 'a code that opens nothing', call: () => ({ json: { roomCode: 'CFHJKMNP' }, status: 410, code: 'link_void' }) },
      { why: 'what can be no code', call: () => ({ json: { roomCode: 'OOOO' }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: 'join/index.post.ts', row: 'joinClass', good: async ({ owner }) => ({ json: { roomCode: (await newClass(owner)).roomCode, firstName: 'Mika' }, status: 201 }),
    bad: [
      { why: 'a code that opens nothing', call: () => ({ json: { roomCode: 'CFHJKMNP', firstName: 'Mika' }, status: 410, code: 'link_void' }) },
      { why: 'an address for a name', call: () => ({ json: { roomCode: 'CFHJKMNP', firstName: 'mika@ropeworks.example' }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: 'join/return.post.ts', row: 'returnToClass', good: async () => ({ json: { personalCode: (await newClassWithStudent()).student.personalCode } }),
    bad: [{ why: 'a code that opens nothing', call: () => ({ json: { personalCode: 'CFHJKMNPRTWX' }, status: 410, code: 'link_void' }) }],
  },
  {
    file: 'me/account.post.ts', row: 'becomeAccount', caller: async world => (await studentIn(world)).agent, good: () => ({ json: account(), status: 202 }),
    bad: [
      { why: 'an address that is taken', call: ({ member }) => ({ json: { ...account(), email: member.email }, status: 409, code: 'email_taken' }) },
      { why: 'a short password', call: () => ({ json: { ...account(), password: 'short' }, status: 422, code: 'invalid_input' }) },
    ],
  },
]
