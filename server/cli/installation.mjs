import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { join } from 'node:path'
import { builtPrograms, dataFolder, inData } from './paths.mjs'
import { Stop } from './run.mjs'

const path = inData('installation.json')

/** What an installation keeps to itself, 0600: the password that seals sessions and the demo's sign-in. */
export function readInstallation() {
  const kept = existsSync(path) ? JSON.parse(readFileSync(path, 'utf8')) : {}
  if (kept.sessionPassword) return kept
  return keepInstallation({ ...kept, sessionPassword: randomBytes(32).toString('hex') })
}

export function keepInstallation(kept) {
  mkdirSync(dataFolder, { recursive: true, mode: 0o755 })
  writeFileSync(`${path}.new`, `${JSON.stringify(kept, null, 2)}\n`, { mode: 0o600 })
  renameSync(`${path}.new`, path)
  return kept
}

/** The settings that all processes of an installation get; what the environment already says goes first. */
export function serviceEnvironment({ databaseUrl, sessionPassword, mailbox, programs = builtPrograms }) {
  return {
    HOST: '127.0.0.1', PORT: '3000', STORAGE_DIR: inData('files'), NUXT_SESSION_PASSWORD: sessionPassword,
    NUXT_TELEMETRY_DISABLED: '1', ...mailbox ? { SMTP_URL: `smtp://127.0.0.1:${mailbox.smtp}` } : {},
    ...process.env,
    ...tls(), DATABASE_URL: databaseUrl, IMAGE_CHILD_PROGRAM: join(programs, 'image-child.mjs'),
  }
}

function tls() {
  const { NUXT_PUBLIC_URL, TLS_CERT, TLS_KEY } = process.env
  if (!TLS_CERT) return {}
  if (!TLS_KEY || !NUXT_PUBLIC_URL?.startsWith('https:')) throw new Stop('TLS_CERT needs TLS_KEY (the key\'s file) and NUXT_PUBLIC_URL (the https:// address that people open).')
  return { NITRO_SSL_CERT: readFileSync(TLS_CERT, 'utf8'), NITRO_SSL_KEY: readFileSync(TLS_KEY, 'utf8') }
}

/** Ports of the local mailbox, the same at each start where they are free; none where a mail server is configured. */
export async function mailboxPorts(kept) {
  if (process.env.SMTP_URL) return undefined
  kept.mailbox = { smtp: await freePort(kept.mailbox?.smtp), page: await freePort(kept.mailbox?.page) }
  return keepInstallation(kept).mailbox
}

function freePort(wanted = 0) {
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', error => wanted === 0 ? reject(error) : resolve(freePort()))
    probe.listen(wanted, '127.0.0.1', () => {
      const { port } = probe.address()
      probe.close(() => resolve(port))
    })
  })
}
