import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import type pg from 'pg'
import sharp from 'sharp'
import { describe, expect, it, onTestFinished } from 'vitest'
import { builtPrograms } from '../../server/cli/paths.mjs'
import { startApplication } from '../support/application'
import { connect, newDatabase, newFolder, runProgram } from '../support/house'
import { newStudio, type Agent } from '../support/studio'

const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex')

/** An installation of this test's own, with a studio that has a photo, a film file and a scan. */
async function installationWithFilm() {
  const databaseUrl = await newDatabase('migrated')
  const storage = join(newFolder(), 'files')
  const application = await startApplication({ programs: builtPrograms, databaseUrl, storage, env: { READING_WAIT_SECONDS: '0.01' } })
  onTestFinished(() => {
    application.web.kill()
    application.worker.kill()
  })
  const { agent, root } = await newStudio('Rope Works Studio', application.address)
  const picture = await sharp({ create: { width: 300, height: 200, channels: 3, background: '#787060' } }).jpeg().toBuffer()
  const form = new FormData()
  form.append('file', new Blob([new Uint8Array(picture)], { type: 'image/jpeg' }), 'quay.jpg')
  const photo = (await agent.call('POST', `${root}/photos`, { body: form })).body.items[0]
  const negative = (await agent.post(`${root}/negatives`, { photoId: photo.id, process: 'cyanotype', size: { widthMm: 60, heightMm: 40 } })).body
  const file = () => agent.fetch('GET', `${root}/negatives/${negative.id}/file?format=tiff`)
  await expect.poll(async () => (await file()).status, { timeout: 40_000 }).toBe(200)
  const film = Buffer.from(await (await file()).arrayBuffer())
  const scan = await keptScan(agent, root, picture)
  await application.stop()
  return { databaseUrl, storage, picture, film, scan }
}

/** A picture without a wedge, handed in as a scan: nobody waits for its reading, so it is kept for corners put by hand. */
async function keptScan(agent: Agent, root: string, picture: Buffer): Promise<Buffer> {
  const bench = (await agent.post(`${root}/benches`, { name: 'Loft table', process: 'cyanotype' })).body
  const wedge = (await agent.post(`${root}/benches/${bench.id}/wedges`, { page: { widthMm: 210, heightMm: 297 } })).body
  const scan = Buffer.concat([picture, Buffer.from('a scan')])
  const form = new FormData()
  form.append('scan', new Blob([new Uint8Array(scan)], { type: 'image/jpeg' }), 'scan.jpg')
  const reading = (await agent.call('POST', `${root}/wedges/${wedge.id}/readings`, { body: form })).body
  await expect.poll(async () => (await agent.get(`${root}/readings/${reading.id}`)).body.state, { timeout: 40_000 }).toBe('failed')
  return scan
}

const tables = async (client: pg.Client) => (await client.query<{ name: string }>(`
  select format('%I.%I', schemaname, tablename) as name from pg_tables where schemaname in ('public', 'drizzle', 'pgboss') order by 1`)).rows.map(row => row.name)

/** Every table's rows as one hash, in an order of their own. */
async function contents(url: string): Promise<Record<string, string>> {
  const client = await connect(url)
  const found: Record<string, string> = {}
  for (const name of await tables(client)) {
    const { rows } = await client.query(`select md5(coalesce(string_agg(row, ',' order by row), '')) as hash, count(*)::int as n from (select t::text as row from ${name} t) as r`)
    found[name] = `${rows[0].n} ${rows[0].hash}`
  }
  return found
}

/** Relative path → hash of all originals, films and scans. */
function immutableFiles(storage: string): Record<string, string> {
  const files = ['originals', 'films', 'scans'].flatMap(top => readdirSync(join(storage, top), { recursive: true, encoding: 'utf8' }).map(path => join(top, path)))
  return Object.fromEntries(files.filter(path => statSync(join(storage, path)).isFile()).sort().map(path => [path, sha256(readFileSync(join(storage, path)))]))
}

const backup = (folder: string, from: { databaseUrl: string, storage: string }) => runProgram('backup', [folder], { DATABASE_URL: from.databaseUrl, STORAGE_DIR: from.storage })
const restore = (folder: string, to: { databaseUrl: string, storage: string }) => runProgram('restore', [folder], { DATABASE_URL: to.databaseUrl, STORAGE_DIR: to.storage })
const emptyInstallation = async () => ({ databaseUrl: await newDatabase('empty'), storage: join(newFolder(), 'files') })

describe('backup and restore', () => {
  it('give another installation the same rows and the same files, hash for hash', async () => {
    const first = await installationWithFilm()
    const folder = join(newFolder(), 'backup')
    expect(await backup(folder, first)).toMatchObject({ status: 0 })
    const second = await emptyInstallation()
    expect(await restore(folder, second)).toMatchObject({ status: 0 })
    expect(await contents(second.databaseUrl)).toEqual(await contents(first.databaseUrl))
    const files = immutableFiles(second.storage)
    expect(files).toEqual(immutableFiles(first.storage))
    expect(Object.values(files).sort()).toEqual([sha256(first.picture), sha256(first.film), sha256(first.scan)].sort())

    // The drill: the restored installation serves, and its audit trail still only grows.
    const application = await startApplication({ programs: builtPrograms, ...second })
    await application.stop()
    const client = await connect(second.databaseUrl)
    await expect(client.query('delete from events')).rejects.toThrow(/append-only/)

    // Damage is noticed before anything is written.
    const third = await emptyInstallation()
    const { files: [some] } = JSON.parse(readFileSync(join(folder, 'manifest.json'), 'utf8'))
    const damaged = readFileSync(join(folder, 'files', some.key))
    damaged[damaged.length >> 1]! ^= 1
    writeFileSync(join(folder, 'files', some.key), damaged)
    expect(await restore(folder, third)).toMatchObject({ status: 1, text: expect.stringContaining('Nothing was restored') })
    expect(await contents(third.databaseUrl)).toEqual({})
    expect(existsSync(third.storage)).toBe(false)
  }, 180_000)

  it('refuse to write over what is there', async () => {
    const installation = { databaseUrl: await newDatabase('migrated'), storage: join(newFolder(), 'files') }
    const folder = join(newFolder(), 'backup')
    expect(await backup(folder, installation)).toMatchObject({ status: 0 })
    expect(await backup(folder, installation)).toMatchObject({ status: 1, text: expect.stringContaining('not empty') })
    const before = await contents(installation.databaseUrl)
    expect(await restore(folder, installation)).toMatchObject({ status: 1, text: expect.stringContaining('not empty') })
    expect(await contents(installation.databaseUrl)).toEqual(before)
  })

  it('take a folder without a manifest for no backup', async () => {
    const to = await emptyInstallation()
    expect(await restore(newFolder(), to)).toMatchObject({ status: 1, text: expect.stringContaining('no finished backup') })
  })
})
