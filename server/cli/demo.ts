import { and, eq } from 'drizzle-orm'
import { readSettings } from '../config'
import { closeDatabase, db, openDatabase } from '../db/client'
import { events, studios, users } from '../db/schema'
import { recordEvent } from '../services/audit'
import { removeDemo } from '../services/demo-removal'
import { closeImageChildren } from '../services/image-child'
import { fillBenches } from './demo/benches'
import { openClassWithStudents } from './demo/class'
import { letTimePass } from './demo/days'
import { inviteAndHandOutToken, openDemoStudio } from './demo/people'
import { makeNegatives, makeNegativesThatWait } from './demo/pictures'
import { fillShelf } from './demo/shelf'

// An invented printmaking studio in a former rope works, to look around in, made by the product's own services.
// Killed half-way it is begun anew: only at the end it is noted that all is there.

const isMade = 'studio.demo-made'

/** Answers whether the demo is there; where other people already work, none is made. */
async function makeDemo(password: string): Promise<boolean> {
  const [studio] = await db().select({ id: studios.id }).from(studios).where(eq(studios.isDemo, true))
  if (studio) {
    const [whole] = await db().select({ id: events.id }).from(events).where(and(eq(events.studioId, studio.id), eq(events.kind, isMade)))
    if (whole) return true
    await removeDemo(studio)
  }
  const [anybody] = await db().select({ id: users.id }).from(users).limit(1)
  if (anybody) return false

  const people = await openDemoStudio(password)
  const shelf = await fillShelf(people.technician)
  const benches = await fillBenches(people.technician, shelf, bench => makeNegativesThatWait(people, bench))
  await makeNegatives(people, benches)
  await openClassWithStudents(people.technician, benches.cyanotype)
  await inviteAndHandOutToken(people)
  await letTimePass(people.owner.id, benches)
  await recordEvent(db(), { studioId: people.owner.id, kind: isMade, recordId: people.owner.id })
  return true
}

openDatabase(readSettings().DATABASE_URL)
makeDemo(process.env.DEMO_PASSWORD!).then((made) => {
  process.stdout.write(JSON.stringify({ made }))
}, (error: Error) => {
  process.stderr.write(`${error.stack}\n`)
  process.exitCode = 1
}).finally(async () => {
  await closeImageChildren()
  await closeDatabase()
})
