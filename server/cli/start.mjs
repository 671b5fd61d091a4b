import http from 'node:http'
import https from 'node:https'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { ensureBuilt } from './build.mjs'
import { developmentBundles, watchPrograms } from './bundles.mjs'
import { migrateDatabase, openDatabaseServer } from './database.mjs'
import { ensureDemo } from './demo.mjs'
import { ensureDependencies } from './dependencies.mjs'
import { mailboxPorts, readInstallation, serviceEnvironment } from './installation.mjs'
import { takeLock } from './lock.mjs'
import { builtPrograms, inData, root, webProgram } from './paths.mjs'
import { endAside, main, say, Stop } from './run.mjs'
import { keepRunning } from './supervisor.mjs'

// `npm start` and `npm run dev`: everything from an empty checkout to a service that answers.

const development = process.argv.includes('--dev')
const graceSeconds = 15
/** what has to be undone at the end, last first */
const undo = []
let ending

main(async () => {
  process.on('SIGINT', () => end(0))
  process.on('SIGTERM', () => end(0))
  await ensureDependencies()
  const lock = await takeLock(inData('running.json'))
  undo.push(() => lock.release())
  try {
    await serve(lock)
  }
  catch (error) {
    if (!(error instanceof Stop)) throw error
    process.stderr.write(`\n${error.message}\n`)
    await end(1)
  }
})

async function serve(lock) {
  const installation = readInstallation()
  const database = await openDatabaseServer()
  undo.push(() => database.stop())
  const programs = development ? developmentBundles : builtPrograms
  let restartWorker = () => {}
  if (development) undo.push((await watchPrograms(programs, () => restartWorker())).stop)
  if (!development) await ensureBuilt()
  migrateDatabase(database, programs)
  const mailbox = await mailboxPorts(installation)
  const env = serviceEnvironment({ databaseUrl: database.url, sessionPassword: installation.sessionPassword, mailbox, programs })
  const demo = database.external ? undefined : ensureDemo({ installation, programs, env, database })
  const address = `http${process.env.TLS_CERT ? 's' : ''}://${env.HOST.includes(':') ? `[${env.HOST}]` : env.HOST}:${env.PORT}`
  const onGivenUp = (reason) => {
    process.stderr.write(`\n${reason}\n`)
    end(1)
  }
  const common = { env, cwd: root, lock, onGivenUp }
  const log = name => development ? undefined : inData('logs', `${name}.log`)
  if (mailbox) {
    const post = keepRunning({
      ...common, name: 'mailbox', program: process.execPath, args: [join(programs, 'local-mailbox.mjs')], logFile: log('mailbox'),
      env: { PATH: process.env.PATH, MAILBOX_DIR: inData('mailbox'), MAILBOX_SMTP_PORT: String(mailbox.smtp), MAILBOX_PAGE_PORT: String(mailbox.page) },
    })
    undo.push(() => post.stop(graceSeconds))
  }
  const worker = keepRunning({ ...common, name: 'worker', program: process.execPath, args: ['--enable-source-maps', join(programs, 'worker.mjs')], logFile: log('worker') })
  restartWorker = () => worker.restart(graceSeconds)
  const web = keepRunning({ ...common, name: 'web', program: process.execPath, args: webArguments(env), logFile: log('web') })
  undo.push(() => Promise.all([web.stop(graceSeconds), worker.stop(graceSeconds)]))
  await untilReady(address)
  say(`\nEmulside is at ${process.env.NUXT_PUBLIC_URL ?? address}`)
  if (demo) say(`Demo sign-in: ${demo.email} (or technician@…, member@…), password: ${demo.password}`)
  if (mailbox) say(`Letters: http://127.0.0.1:${mailbox.page} (no mail server is configured)`)
  if (!development) say(`Logs: ${inData('logs')}`)
  say('Ctrl-C stops everything.\n')
}

function webArguments(env) {
  if (!development) return ['--enable-source-maps', webProgram]
  return [join(root, 'node_modules/nuxt/bin/nuxt.mjs'), 'dev', '--host', env.HOST, '--port', env.PORT, '--no-clear']
}

async function untilReady(address) {
  const deadline = Date.now() + 120_000
  while (Date.now() < deadline && !ending) {
    if (await isReady(`${address}/api/health/ready`)) return
    await sleep(100)
  }
  if (!ending) throw new Stop(`Nothing answers at ${address}. See ${inData('logs')}.`)
}

/** The certificate isn't looked at: it is our own process on this machine. */
const isReady = url => new Promise((resolve) => {
  const request = (url.startsWith('https:') ? https : http).get(url, { rejectUnauthorized: false }, (answer) => {
    answer.resume()
    resolve(answer.statusCode === 200)
  })
  request.on('error', () => resolve(false))
})

/** Stops web and worker, then the database, then gives the lock back. A second signal doesn't wait. */
function end(code) {
  if (ending) return process.exit(1)
  ending = (async () => {
    say('Stopping …')
    endAside()
    for (const step of undo.reverse()) await step()
    process.exit(code)
  })()
  return ending
}
