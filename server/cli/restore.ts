import { spawnSync } from 'node:child_process'
import { copyFile, readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import pg from 'pg'
import { storageSettingsSchema } from '../config'
import { openConfiguredStorage } from '../services/storage'
import type { Storage } from '../storage'
import { keptKinds } from '../storage/keys'
import { hashFile, manifestSchema, type Manifest } from './backup-manifest'
import { knownMigrations } from './known-migrations'

// Into an empty installation only. Everything is checked against the manifest's hashes before anything is written.

async function readManifest(folder: string): Promise<Manifest> {
  const text = await readFile(join(folder, 'manifest.json'), 'utf8').catch(() => {
    throw new Error(`${folder} is no finished backup: it has no manifest.json.`)
  })
  const read = manifestSchema.safeParse(JSON.parse(text))
  if (!read.success) throw new Error(`The manifest of ${folder} can't be read by this version.`)
  return read.data
}

async function verify(folder: string, { database, files, migrations }: Manifest): Promise<void> {
  const known = knownMigrations()
  if (migrations.some((hash, i) => hash !== known[i]?.hash)) throw new Error('The backup was made by a newer or another version. Restore it with that version.')
  for (const { path, bytes, sha256 } of [{ path: join(folder, database.file), ...database }, ...files.map(f => ({ path: join(folder, 'files', f.key), ...f }))]) {
    const facts = await hashFile(path).catch(() => undefined)
    if (facts?.sha256 !== sha256 || facts.bytes !== bytes) throw new Error(`${path} is missing or damaged. Nothing was restored.`)
  }
}

async function requireEmpty(client: pg.Client, storage: Storage): Promise<void> {
  const { rows: [{ tables }] } = await client.query(`select count(*)::int as tables from pg_tables where schemaname not in ('pg_catalog', 'information_schema')`)
  const files = [...await readdir(storage.root).catch(() => []), ...(await Promise.all(keptKinds.map(kind => storage.list(kind)))).flat()]
  if (tables > 0 || files.length > 0) throw new Error('This installation is not empty, so nothing was restored. Set DATA_DIR to a new folder, or move the data folder away.')
}

function restoreDatabase(url: string, file: string): void {
  const address = new URL(url)
  const env = { ...process.env, PGPASSWORD: decodeURIComponent(address.password) }
  address.password = ''
  const program = join(process.env.POSTGRES_BIN!, 'pg_restore')
  const { status } = spawnSync(program, ['--no-owner', '--no-privileges', '--single-transaction', '--exit-on-error', '--dbname', address.href, file], { env, stdio: 'inherit' })
  if (status !== 0) throw new Error('pg_restore failed; the database was left as it was.')
}

async function putBack(storage: Storage, from: string, key: string, sha256: string): Promise<void> {
  const file = await storage.temporary('restored')
  try {
    await copyFile(from, file.path)
    if ((await hashFile(file.path)).sha256 !== sha256) throw new Error(`${key} changed while it was copied. Nothing was restored.`)
    await file.keep(key)
  }
  finally {
    await file.discard()
  }
}

async function restore(folder: string, url: string, storage: Storage): Promise<Manifest> {
  const manifest = await readManifest(folder)
  await verify(folder, manifest)
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    await requireEmpty(client, storage)
    try {
      for (const { key, sha256 } of manifest.files) await putBack(storage, join(folder, 'files', key), key, sha256)
      restoreDatabase(url, join(folder, manifest.database.file))
    }
    catch (error) {
      await Promise.all([...keptKinds, 'temporary'].map(folder => storage.removeFolder(folder)))
      throw error
    }
    return manifest
  }
  finally {
    await client.end()
  }
}

restore(process.argv[2]!, process.env.DATABASE_URL!, openConfiguredStorage(storageSettingsSchema.parse(process.env))).then(({ files, notThere }) => {
  process.stdout.write(`Restored the database and ${files.length} files, each with its hash.${notThere.length ? ` ${notThere.length} film files are made again when asked for.` : ''}\n`)
}, (error: Error) => {
  process.stderr.write(`${error.message}\n`)
  process.exitCode = 1
})
