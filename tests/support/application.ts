import { join } from 'node:path'
import { webProgram } from '../../server/cli/paths.mjs'
import * as service from '../../server/cli/service-processes'

export interface Application { address: string, databaseUrl: string, storage: string }
interface Settings { programs: string, databaseUrl: string, storage: string, env?: Record<string, string> }

const programsOf = ({ programs }: Settings) => ({ web: webProgram, worker: join(programs, 'worker.mjs') })

/** The settings that tests run with: short leases, patience with readings, answers checked against the contract, no rate limits. */
function testEnvironment({ programs, databaseUrl, storage, env = {} }: Settings) {
  return {
    ...process.env, NODE_ENV: 'production', DATABASE_URL: databaseUrl, STORAGE_DIR: storage,
    NUXT_SESSION_PASSWORD: 'only-for-tests-only-for-tests-only', IMAGE_CHILD_PROGRAM: join(programs, 'image-child.mjs'),
    LEASE_SECONDS: '1', LEASE_RENEW_SECONDS: '0.3', POLL_SECONDS: '0.2', READING_WAIT_SECONDS: '30', CHECK_ANSWERS: 'true', RATE_LIMITS: 'false',
    FREE_DISK_MIN_BYTES: '0', LOG_LEVEL: 'info',
    // Nobody listens there: letters stay in the outbox, where tests read them.
    SMTP_URL: 'smtp://127.0.0.1:9', LETTER_RETRY_SECONDS: '0.2', LETTER_ATTEMPT_SECONDS: '1', ...env,
  }
}

/** Logs stand beside the storage, which holds nothing but the service's own files. */
const logFolder = ({ storage }: Settings) => `${storage}.logs`

/** A worker process on a database; tests of kills start and kill their own. */
export const startWorker = (settings: Settings) => service.startWorker(programsOf(settings), testEnvironment(settings), logFolder(settings))

/** Web on a free port, answering when this resolves. */
export const startWeb = (settings: Settings) => service.startWeb(programsOf(settings), testEnvironment(settings), logFolder(settings))

/** Web and a worker. */
export async function startApplication(settings: Settings) {
  const web = await startWeb(settings)
  const worker = startWorker(settings)
  return { ...settings, address: web.address, web, worker, children: [web.child, worker.child], stop: () => Promise.all([web.stop(), worker.stop()]) }
}
