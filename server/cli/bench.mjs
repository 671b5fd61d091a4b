import { rmSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuilt } from './build.mjs'
import { migrateDatabase } from './database.mjs'
import { ensureDependencies } from './dependencies.mjs'
import { serviceEnvironment } from './installation.mjs'
import { takeLock } from './lock.mjs'
import { builtPrograms, inData, webProgram } from './paths.mjs'
import { openCluster } from './postgres.mjs'
import { main, runAside } from './run.mjs'

// `npm run bench -- [suite …]`: measures the built service on a cluster of its own, with the settings people have.

main(async () => {
  await ensureDependencies()
  await ensureBuilt()
  const lock = await takeLock(inData('bench-running.json'))
  const cluster = await openCluster({ folder: inData('bench-postgres'), keep: inData('bench-postgres.json') })
  const folder = inData('bench')
  try {
    cluster.sql('postgres', 'drop database emulside with (force);\ncreate database emulside owner emulside;')
    migrateDatabase(cluster, builtPrograms)
    const env = serviceEnvironment({ databaseUrl: cluster.url, sessionPassword: 'only-for-benches-only-for-benches' })
    const programs = { WEB_PROGRAM: webProgram, WORKER_PROGRAM: join(builtPrograms, 'worker.mjs'), BENCH_FOLDER: folder }
    await runAside(process.execPath, ['--enable-source-maps', join(builtPrograms, 'bench.mjs'), ...process.argv.slice(2)], { env: { ...env, ...programs } })
  }
  finally {
    cluster.stop()
    rmSync(folder, { recursive: true, force: true })
    lock.release()
  }
})
