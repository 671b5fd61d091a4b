import { spawnSync } from 'node:child_process'
import { mkdir, readdir, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import pg from 'pg'
import { storageSettingsSchema } from '../config'
import { openConfiguredStorage } from '../services/storage'
import type { Storage } from '../storage'
import { hashFile, hashStream, type FileFacts, type Manifest } from './backup-manifest'
import { namedFiles, type NamedFile } from './named-files'

// The dump and the files that it names, as one snapshot sees them: first the dump, then the files, which never change.

function dump(url: string, snapshot: string, file: string): void {
  const address = new URL(url)
  const env = { ...process.env, PGPASSWORD: decodeURIComponent(address.password) }
  address.password = ''
  const program = join(process.env.POSTGRES_BIN!, 'pg_dump')
  const { status } = spawnSync(program, ['--format=custom', '--no-owner', '--no-privileges', `--snapshot=${snapshot}`, '--file', file, address.href], { env, stdio: 'inherit' })
  if (status !== 0) throw new Error('pg_dump failed; the backup is not usable.')
}

/** Copies and compares with the hash in the row; undefined when a film file has left the cache. */
async function copyNamed(file: NamedFile, storage: Storage, to: string): Promise<FileFacts | undefined> {
  if (!await storage.stat(file.key)) {
    if (file.mayBeMissing) return undefined
    throw new Error(`An original is missing from the storage: ${file.key}. The backup was broken off; look after the disk first.`)
  }
  const facts = await hashStream(await storage.read(file.key), to)
  if (facts.sha256 !== file.sha256) throw new Error(`${file.key} is not the file it was: its hash differs. The backup was broken off; look after the disk first.`)
  return facts
}

async function backup(folder: string, url: string, storage: Storage): Promise<Manifest> {
  if ((await readdir(folder).catch(() => [])).length > 0) throw new Error(`${folder} is not empty. A backup goes into a folder of its own.`)
  await mkdir(folder, { recursive: true, mode: 0o700 })
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    await client.query('begin isolation level repeatable read read only')
    const { rows: [{ snapshot }] } = await client.query('select pg_export_snapshot() as snapshot')
    const database = join(folder, 'database.dump')
    dump(url, snapshot, database)
    const { rows: migrations } = await client.query<{ hash: string }>('select hash from drizzle.__drizzle_migrations order by id')
    const manifest: Manifest = {
      format: 1, madeAt: new Date().toISOString(), migrations: migrations.map(row => row.hash),
      database: { file: 'database.dump', ...await hashFile(database) }, files: [], notThere: [],
    }
    for (const file of await namedFiles(client)) {
      const facts = await copyNamed(file, storage, join(folder, 'files', file.key))
      if (facts) manifest.files.push({ key: file.key, ...facts })
      else manifest.notThere.push(file.key)
    }
    // Written last: a folder without it is no backup.
    await writeFile(join(folder, 'manifest.json'), `${JSON.stringify(manifest, null, 1)}\n`, { mode: 0o600 })
    return manifest
  }
  finally {
    await client.end()
  }
}

backup(process.argv[2]!, process.env.DATABASE_URL!, openConfiguredStorage(storageSettingsSchema.parse(process.env))).then(({ files, database }) => {
  const bytes = files.reduce((sum, file) => sum + file.bytes, database.bytes)
  process.stdout.write(`Backed up the database and ${files.length} files, ${(bytes / 1e6).toFixed(1)} MB, to ${process.argv[2]}\n`)
}, (error: Error) => {
  process.stderr.write(`${error.message}\n`)
  process.exitCode = 1
})
