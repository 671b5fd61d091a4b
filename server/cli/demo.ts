import { eq } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import type { Role } from '#shared/schemas/people'
import { readSettings } from '../config'
import { closeDatabase, db, openDatabase } from '../db/client'
import { memberships, users } from '../db/schema'
import { enterStudio, type StudioAccess } from '../services/access'
import { recordEvent } from '../services/audit'
import { createBench, listBenches } from '../services/benches'
import { createCurve, useCurve } from '../services/curves'
import { closeImageChildren } from '../services/image-child'
import { register, signIn, studiosOf } from '../services/people'
import { createReading, listReadings } from '../services/readings'

// An invented studio to look around in: three people, one bench with a curve. Each step may have been done before.

const people = [
  { name: 'Ines Marlow', email: 'owner@ropeworks.example', role: 'owner' },
  { name: 'Tobias Reen', email: 'technician@ropeworks.example', role: 'technician' },
  { name: 'Ada Quill', email: 'member@ropeworks.example', role: 'member' },
] as const satisfies { name: string, email: string, role: Role }[]
const studioName = 'Rope Works Print Studio'

async function personFor({ name, email }: typeof people[number], password: string): Promise<string> {
  const studioOfTheirOwn = email === people[0].email ? studioName : undefined
  try {
    return (await register({ name, email, password, studioName: studioOfTheirOwn })).user.id
  }
  catch (error) {
    if (!(error instanceof ComputeError && error.code === 'email_taken')) throw error
    return (await signIn({ email, password })).user.id
  }
}

async function join(studio: StudioAccess, userId: string, role: Role): Promise<void> {
  await db().transaction(async (tx) => {
    const [row] = await tx.insert(memberships).values({ studioId: studio.id, userId, role }).onConflictDoNothing().returning()
    if (row) await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'person.joined', recordId: userId, details: { role } })
  })
}

/**
 * Print lightness of a made-up cyanotype at an ink level: full ink holds back 1.9 of UV density, the paper answers
 * with a logistic curve over log exposure between L* 24 and 93. Invented, and only for this demo.
 */
function simulatedLightness(level: number): number {
  const deepest = 24, paper = 93, answer = (n: number) => 1 / (1 + Math.exp(4.2 * (1.05 - 1.9 * n)))
  return deepest + (paper - deepest) * (answer(level) - answer(0)) / (answer(1) - answer(0))
}

/** 31 steps, read a little unevenly, as a spot instrument reads a hand-coated print. */
const measuredValues = () => Array.from({ length: 31 }, (_, i) => {
  const level = Math.round(255 * i / 30) / 255
  return { level, value: Number((simulatedLightness(level) + 0.4 * Math.sin(12.9 * i)).toFixed(1)) }
})

async function benchWithCurve(studio: StudioAccess): Promise<void> {
  const page = { limit: 1 }
  const bench = (await listBenches(studio, page)).items[0] ?? (await createBench(studio, {
    name: 'Cyanotype, river paper', process: 'cyanotype', baseExposure: { value: 480, unit: 's' },
    recipe: { coats: 2, coatedWith: 'brush', drying: 'An hour in the dark, then ten minutes of cool air' },
    path: { fileKind: 'tiff', bitDepth: 16, pixelsPerInch: 360, colourAdjustment: 'off', mediaType: 'Backlit film' },
  })).item
  if (bench.curveInUse) return
  const reading = (await listReadings(studio, bench.id, page)).items[0]
    ?? (await createReading(studio, bench.id, { body: { unit: 'lightness', zero: 'absolute', values: measuredValues() } })).item
  const { item: curve } = await createCurve(studio, bench.id, { readingIds: [reading.id], notes: 'Values of a made-up print, for looking around.' })
  await useCurve(studio, curve.id)
}

/** Answers whether the demo is there; where other people already work, none is made. */
async function makeDemo(password: string): Promise<boolean> {
  const [first] = await db().select({ email: users.email }).from(users).orderBy(users.createdAt).limit(1)
  if (first && first.email !== people[0].email) return false
  const ids = []
  for (const person of people) ids.push(await personFor(person, password))
  const [owner] = await db().select().from(users).where(eq(users.email, people[0].email))
  const studio = await enterStudio(owner!, (await studiosOf(owner!.id))[0]!.id, 'owner')
  for (const [i, { role }] of people.entries()) await join(studio, ids[i]!, role)
  await benchWithCurve(studio)
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
