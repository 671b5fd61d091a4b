import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { ensurePackages } from './debian.mjs'
import { capture, Stop } from './run.mjs'

const debianVersion = '15'
const debianPrograms = '/usr/lib/postgresql'

/** The folder with PostgreSQL's programs: `POSTGRES_BIN`, Debian's newest (or the wanted version), or the search path's. */
export function findPrograms(version) {
  const versions = existsSync(debianPrograms) ? readdirSync(debianPrograms).sort((a, b) => Number(b) - Number(a)) : []
  const folders = versions.filter(name => !version || name === version).map(name => join(debianPrograms, name, 'bin'))
  const paths = [process.env.POSTGRES_BIN, ...folders, ...(process.env.PATH ?? '').split(':')].filter(Boolean)
  return paths.find(folder => ['initdb', 'pg_ctl', 'postgres', 'psql', 'pg_dump'].every(name => existsSync(join(folder, name))))
}

/** The programs that fit a cluster's folder, installed when missing. A cluster of another version is refused, never made anew. */
export function programsFor(cluster) {
  const versionFile = join(cluster, 'PG_VERSION')
  const made = existsSync(versionFile) ? readFileSync(versionFile, 'utf8').trim() : undefined
  if (!findPrograms(made)) ensurePackages([`postgresql-${debianVersion}`])
  const programs = findPrograms(made) ?? findPrograms()
  if (!programs) throw new Stop('No PostgreSQL server was found. Set POSTGRES_BIN to the folder with initdb, or DATABASE_URL to a running server.')
  const found = majorVersion(programs)
  if (made && made !== found) throw new Stop(otherVersion(cluster, made, found))
  return programs
}

export function majorVersion(programs) {
  return /(\d+)(?:\.|\s|$)/.exec(capture(join(programs, 'postgres'), ['--version']).text)?.[1]
}

const otherVersion = (cluster, made, found) => `The database in ${cluster} was made by PostgreSQL ${made}, but version ${found} is what is here. Nothing was changed. To go on:
  1. Install PostgreSQL ${made} (on Debian: postgresql-${made}) and start once more; or
  2. where PostgreSQL ${made} is: npm run backup FOLDER
  3. move ${cluster} away, start with PostgreSQL ${found}, stop, and: npm run restore FOLDER`

/** PostgreSQL does not run as root: it then runs as the user postgres, whom Debian's package makes. */
export function serverIdentity() {
  if (process.getuid?.() !== 0) return {}
  const line = readFileSync('/etc/passwd', 'utf8').split('\n').find(row => row.startsWith('postgres:'))
  if (!line) throw new Stop('PostgreSQL does not run as root, and there is no user "postgres" here. Start as a normal user.')
  const [, , uid, gid] = line.split(':')
  return { uid: Number(uid), gid: Number(gid) }
}
