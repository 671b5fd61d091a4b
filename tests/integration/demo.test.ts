import { spawn } from 'node:child_process'
import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { expect, it } from 'vitest'
import { builtPrograms, root } from '../../server/cli/paths.mjs'
import values from '../../server/cli/demo/values.json'
import { valueAt } from '../../shared/tone/response'
import { newPhoto } from '../support/negatives'
import { ownInstallation } from '../support/own-installation'
import { Agent } from '../support/studio'

const password = 'slow water under the quay'
type Installation = Awaited<ReturnType<typeof ownInstallation>>

/** Runs the program that makes the demo; `until` says when to kill it. */
async function runDemo({ databaseUrl, storage }: Installation, until?: () => Promise<boolean>): Promise<{ made: boolean } | 'killed'> {
  const env = {
    ...process.env, DATABASE_URL: databaseUrl, STORAGE_DIR: storage, NUXT_SESSION_PASSWORD: 'only-for-tests-only-for-tests-only', SMTP_URL: 'smtp://127.0.0.1:9',
    IMAGE_CHILD_PROGRAM: join(builtPrograms, 'image-child.mjs'), DEMO_PASSWORD: password, DEMO_PHOTOS: join(root, 'server/cli/demo/photos'), FREE_DISK_MIN_BYTES: '0',
  }
  const child = spawn(process.execPath, [join(builtPrograms, 'demo.mjs')], { env, stdio: ['ignore', 'pipe', 'inherit'] })
  let text = ''
  child.stdout.on('data', chunk => text += chunk)
  const ended = new Promise(resolve => child.once('close', resolve))
  if (!until) return await ended.then(() => JSON.parse(text))
  await expect.poll(until, { timeout: 60_000, interval: 20 }).toBe(true)
  child.kill('SIGKILL')
  await ended
  return 'killed'
}

async function signIn(address: string, role: string) {
  const agent = new Agent(address)
  const answer = await agent.post('/api/auth/login', { email: `${role}@ropeworks.example`, password })
  expect(answer.status, answer.text).toBe(200)
  return { agent, studios: answer.body.studios as { id: string, role: string, isDemo?: true }[] }
}

/** Rows of every table, but for the audit trail and what only counts. */
async function rowsOfAllTables({ rows }: Installation): Promise<Record<string, number>> {
  const tables = await rows(`select table_name from information_schema.tables where table_schema = 'public' and table_type = 'BASE TABLE' and table_name not in ('events', 'rate_limits')`)
  const counts = await Promise.all(tables.map(async ({ table_name: name }) => [name, (await rows(`select count(*)::int as n from "${name}"`))[0].n]))
  return Object.fromEntries(counts)
}

it('is made after a kill half-way, once, with sign-ins, benches and a class; removed, it leaves nothing and touches nobody else', async () => {
  const installation = await ownInstallation()
  const { rows, storage } = installation
  const atStart = await rowsOfAllTables(installation)
  expect(await runDemo(installation, async () => (await rows('select 1 from negatives')).length > 0)).toBe('killed')
  expect(await runDemo(installation)).toEqual({ made: true })
  const made = await rowsOfAllTables(installation)
  expect(made).toMatchObject({ studios: 1, users: 8, classes: 1, class_students: 5, invitations: 1, tokens: 1, letters: 1, curves: 4 })
  expect(await runDemo(installation)).toEqual({ made: true })
  expect(await rowsOfAllTables(installation)).toEqual(made)

  const { address } = await installation.web()
  const [owner, technician, member] = [await signIn(address, 'owner'), await signIn(address, 'technician'), await signIn(address, 'member')]
  const demo = owner.studios[0]!
  expect(owner.studios).toMatchObject([{ role: 'owner', isDemo: true }])
  // Only its owner is told what it is.
  for (const other of [technician, member]) expect(other.studios[0]).not.toHaveProperty('isDemo')
  expect([technician.studios[0]!.role, member.studios[0]!.role]).toEqual(['technician', 'member'])

  const path = `/api/studios/${demo.id}`
  const benches = (await technician.agent.get(`${path}/benches`)).body.items as { id: string, name: string, starter: boolean, curveInUse: { id: string, version: number } | null }[]
  const inUse = benches.find(bench => bench.curveInUse && !bench.starter)!
  expect(inUse.curveInUse!.version).toBe(2)
  const states = await Promise.all(benches.map(async ({ id }) => (await technician.agent.get(`${path}/benches/${id}/curves`)).body.items.map((curve: { state: string }) => curve.state)))
  expect(states.flat().sort()).toEqual(['draft', 'in-use', 'in-use', 'retired'])

  // Against the simulated process itself, which the fit saw only through uneven prints: derived, within what the fit expects of itself (95 %).
  const curve = (await technician.agent.get(`${path}/curves/${inUse.curveInUse!.id}`)).body
  const errors = values.origin.truth.cyanotype.map((lightness, i) => Math.abs(valueAt(curve.response, i / 10) - lightness))
  expect(Math.max(...errors)).toBeLessThan(curve.expectedError.curve.p95)
  expect(curve.expectedError.curve.p95).toBeGreaterThan(0.2)
  expect(curve.expectedError.curve.p95).toBeLessThan(2.5)

  const [klass] = (await technician.agent.get(`${path}/classes`)).body.items
  const board = (await technician.agent.get(`${path}/classes/${klass.id}`)).body
  expect(board.students.flatMap((student: { handedIn: unknown[] }) => student.handedIn)).toHaveLength(1)

  const other = await installation.studioAt({ address })
  const photo = await newPhoto(other)
  expect((await other.agent.delete(`${path}/demo`)).status).toBe(404)
  expect((await other.agent.get(path)).status).toBe(404)
  expect((await technician.agent.delete(`${path}/demo`)).status).toBe(403)
  expect((await other.agent.delete(`${other.root}/demo`)).status).toBe(409)

  expect((await owner.agent.delete(`${path}/demo`)).status).toBe(204)
  expect((await owner.agent.get('/api/me')).status).toBe(401)
  expect(await rowsOfAllTables(installation)).toEqual({ ...atStart, studios: 1, users: 1, memberships: 1, sessions: 1, photos: 1 })
  const files = readdirSync(storage, { recursive: true, encoding: 'utf8' })
  expect(files.filter(name => name.includes(demo.id) && !name.startsWith('temporary/photo_'))).toEqual([])
  expect(files.some(name => name.includes(photo.id))).toBe(true)
  expect((await other.agent.get(`${other.root}/photos/${photo.id}`)).status).toBe(200)
  expect(await runDemo(installation)).toEqual({ made: false })
}, 180_000)
