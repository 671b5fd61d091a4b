import { spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'
import { mkdir, readdir, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import pg from 'pg'
import { openStorage, storageKeys } from '../storage'
import { hashFile, type FileFacts, type Manifest } from './backup-manifest'

// The dump and the files that it names, as one snapshot sees them: first the dump, then the files, which never change.

interface NamedFile { key: string, sha256: string, mayBeMissing: boolean }

async function namedFiles(client: pg.Client): Promise<NamedFile[]> {
  const photos = await client.query<{ studio_id: string, id: string, sha256: string }>('select studio_id, id, sha256 from photos order by studio_id, id')
  const renders = await client.query<{ studio_id: string, render_key: string, format: string, sha256: string }>(
    `select studio_id, render_key, format, sha256 from renders where state = 'ready' order by studio_id, render_key`)
  const scans = await client.query<{ studio_id: string, id: string, file_sha256: string }>('select studio_id, id, file_sha256 from readings where file_sha256 is not null order by studio_id, id')
  return [
    ...scans.rows.map(row => ({ key: storageKeys.scan(row.studio_id, row.id), sha256: row.file_sha256, mayBeMissing: false })),
    ...photos.rows.map(row => ({ key: storageKeys.original(row.studio_id, row.id), sha256: row.sha256, mayBeMissing: false })),
    ...renders.rows.map(row => ({ key: storageKeys.film(row.studio_id, row.render_key, row.format), sha256: row.sha256, mayBeMissing: true })),
  ]
}

function dump(url: string, snapshot: string, file: string): void {
  const address = new URL(url)
  const env = { ...process.env, PGPASSWORD: decodeURIComponent(address.password) }
  address.password = ''
  const program = join(process.env.POSTGRES_BIN!, 'pg_dump')
  const { status } = spawnSync(program, ['--format=custom', '--no-owner', '--no-privileges', `--snapshot=${snapshot}`, '--file', file, address.href], { env, stdio: 'inherit' })
  if (status !== 0) throw new Error('pg_dump failed; the backup is not usable.')
}

/** Copies and compares with the hash in the row; undefined when a film file has left the cache. */
async function copyNamed(file: NamedFile, from: string, to: string): Promise<FileFacts | undefined> {
  if (!existsSync(from)) {
    if (file.mayBeMissing) return undefined
    throw new Error(`An original is missing from the storage: ${file.key}. The backup was broken off; look after the disk first.`)
  }
  const facts = await hashFile(from, to)
  if (facts.sha256 !== file.sha256) throw new Error(`${file.key} is not the file it was: its hash differs. The backup was broken off; look after the disk first.`)
  return facts
}

async function backup(folder: string, url: string, storageFolder: string): Promise<Manifest> {
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
    const storage = openStorage(storageFolder)
    for (const file of await namedFiles(client)) {
      const facts = await copyNamed(file, storage.pathOf(file.key), join(folder, 'files', file.key))
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

backup(process.argv[2]!, process.env.DATABASE_URL!, process.env.STORAGE_DIR!).then(({ files, database }) => {
  const bytes = files.reduce((sum, file) => sum + file.bytes, database.bytes)
  process.stdout.write(`Backed up the database and ${files.length} files, ${(bytes / 1e6).toFixed(1)} MB, to ${process.argv[2]}\n`)
}, (error: Error) => {
  process.stderr.write(`${error.message}\n`)
  process.exitCode = 1
})
