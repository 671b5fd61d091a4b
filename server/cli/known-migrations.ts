import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { join } from 'node:path'

/** The bundled programs have the migrations beside them. */
export const migrationsFolder = join(import.meta.dirname, 'migrations')

/** This version's migrations in their order, with the hash that Drizzle keeps of each. */
export function knownMigrations(): { tag: string, hash: string }[] {
  const { entries } = JSON.parse(readFileSync(join(migrationsFolder, 'meta/_journal.json'), 'utf8')) as { entries: { tag: string }[] }
  return entries.map(({ tag }) => ({ tag, hash: createHash('sha256').update(readFileSync(join(migrationsFolder, `${tag}.sql`))).digest('hex') }))
}
