import { rmSync } from 'node:fs'
import { join } from 'node:path'
import type { TestProject } from 'vitest/node'
import { ensureBuilt } from '../../server/cli/build.mjs'
import { takeLock } from '../../server/cli/lock.mjs'
import { builtPrograms, inData } from '../../server/cli/paths.mjs'
import { openTestCluster } from './cluster'
import { startApplication } from './application'
import { openIdSettings } from './openid-accounts'
import { startOpenIdProvider } from './openid-provider'
import type {} from './provided-context'

/**
 * Builds once, starts a test cluster without fsync, migrates a template, and gives every vitest worker a database
 * cloned from it and one running application. `TEST_ADDRESS` (with `DATABASE_URL`) uses a running `npm run dev` instead.
 */
export default async function setup(project: TestProject) {
  const { TEST_ADDRESS, DATABASE_URL } = process.env
  if (TEST_ADDRESS) {
    project.provide('applications', [{ address: TEST_ADDRESS, databaseUrl: DATABASE_URL ?? '', storage: '' }])
    project.provide('databaseUrl', DATABASE_URL ?? '')
    project.provide('superuserUrl', '')
    project.provide('openIdIssuer', '')
    return
  }
  const started = await (shared.harness ??= start(Number(project.vitest.config.maxWorkers)))
  project.provide('applications', started.applications)
  project.provide('databaseUrl', started.databaseUrl)
  project.provide('superuserUrl', started.superuserUrl)
  project.provide('openIdIssuer', started.openIdIssuer)
  shared.users += 1
  return async () => {
    shared.users -= 1
    if (shared.users === 0) await started.stop()
  }
}

/** Two vitest projects may need it in one run. */
const shared = ((globalThis as { emulsideTests?: { harness?: ReturnType<typeof start>, users: number } }).emulsideTests ??= { users: 0 })

async function start(count: number) {
  const lock = await takeLock(inData('test-running.json'))
  await ensureBuilt()
  const cluster = await openTestCluster()
  const openId = await startOpenIdProvider()
  const env = openIdSettings(openId.issuer)
  const files = join(inData('test-files'), String(process.pid))
  const running = await Promise.all(Array.from({ length: count }, (_, i) =>
    startApplication({ programs: builtPrograms, databaseUrl: cluster.cloneTemplate(`test_${i + 1}`), storage: join(files, String(i + 1)), env })))
  for (const { pid } of running.flatMap(({ children }) => children)) lock.record(pid)
  return {
    applications: running.map(({ address, databaseUrl, storage }) => ({ address, databaseUrl, storage })),
    databaseUrl: cluster.urlOf('scratch'),
    superuserUrl: cluster.superuserUrl,
    openIdIssuer: openId.issuer,
    async stop() {
      await openId.stop()
      await Promise.all(running.map(application => application.stop()))
      cluster.stop()
      rmSync(files, { recursive: true, force: true })
      lock.release()
    },
  }
}
