import { spawnSync } from 'node:child_process'
import { readdir, readFile, rm } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import pg from 'pg'
import { openStorage } from '../storage'
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

async function requireEmpty(client: pg.Client, storageFolder: string): Promise<void> {
  const { rows: [{ tables }] } = await client.query(`select count(*)::int as tables from pg_tables where schemaname not in ('pg_catalog', 'information_schema')`)
  const files = await readdir(storageFolder).catch(() => [])
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

async function restore(folder: string, url: string, storageFolder: string): Promise<Manifest> {
  const manifest = await readManifest(folder)
  await verify(folder, manifest)
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    await requireEmpty(client, storageFolder)
    const storage = openStorage(storageFolder)
    try {
      for (const { key, sha256 } of manifest.files) {
        const copied = await hashFile(join(folder, 'files', key), storage.pathOf(key))
        if (copied.sha256 !== sha256) throw new Error(`${key} changed while it was copied. Nothing was restored.`)
      }
      restoreDatabase(url, join(folder, manifest.database.file))
    }
    catch (error) {
      await Promise.all(['originals', 'films'].map(name => rm(join(dirname(storage.pathOf('x')), name), { recursive: true, force: true })))
      throw error
    }
    return manifest
  }
  finally {
    await client.end()
  }
}

restore(process.argv[2]!, process.env.DATABASE_URL!, process.env.STORAGE_DIR!).then(({ files, notThere }) => {
  process.stdout.write(`Restored the database and ${files.length} files, each with its hash.${notThere.length ? ` ${notThere.length} film files are made again when asked for.` : ''}\n`)
}, (error: Error) => {
  process.stderr.write(`${error.message}\n`)
  process.exitCode = 1
})
