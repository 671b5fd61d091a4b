import { Agent, application, newStudio } from './studio'
import type { InStudio } from './negatives'

export const inDays = (days: number) => new Date(Date.now() + 86_400_000 * days).toISOString()

export interface TestClass { id: string, roomCode: string, revision: number }

/** A class of a studio, open for a week unless said otherwise. */
export async function newClass({ agent, root }: InStudio, name = 'Blue afternoon', endsAt = inDays(7)): Promise<TestClass> {
  const answer = await agent.post(`${root}/classes`, { name, endsAt })
  if (answer.status !== 201) throw new Error(`Opening a class answered ${answer.status}: ${answer.text}`)
  return answer.body
}

/** Somebody who joins by the room code, with a first name alone. */
export async function newStudent({ roomCode }: Pick<TestClass, 'roomCode'>, firstName = 'Mika', address = application().address) {
  const agent = new Agent(address)
  const answer = await agent.post('/api/join', { roomCode, firstName })
  if (answer.status !== 201) throw new Error(`Joining answered ${answer.status}: ${answer.text}`)
  const { user, studio, personalCode } = answer.body
  return { agent, id: user.id as string, name: user.name as string, personalCode: personalCode as string, root: `/api/studios/${studio.id}` }
}

/** A studio with a class and a student in it. */
export async function newClassWithStudent() {
  const teacher = await newStudio()
  const open = await newClass(teacher)
  const student = await newStudent(open)
  return { teacher, open, student, board: `${teacher.root}/classes/${open.id}` }
}
