import { join, resolve } from 'node:path'
import { bundlePrograms, developmentBundles } from './bundles.mjs'
import { migrateDatabase, openDatabaseServer } from './database.mjs'
import { ensureDependencies } from './dependencies.mjs'
import { readInstallation, serviceEnvironment } from './installation.mjs'
import { takeLock } from './lock.mjs'
import { inData } from './paths.mjs'
import { main, run, say, Stop } from './run.mjs'

// `npm run restore FOLDER`: into an empty installation, which doesn't run meanwhile.

main(async () => {
  const folder = process.argv[2]
  if (!folder) throw new Stop('Say where from: npm run restore FOLDER')
  await ensureDependencies()
  await bundlePrograms(developmentBundles)
  const lock = await takeLock(inData('running.json'))
  const database = await openDatabaseServer()
  try {
    if (!database.programs) throw new Stop('pg_restore is missing here. Install PostgreSQL\'s client programs.')
    const env = serviceEnvironment({ databaseUrl: database.url, sessionPassword: readInstallation().sessionPassword })
    run(process.execPath, [join(developmentBundles, 'restore.mjs'), resolve(folder)], { env: { ...env, POSTGRES_BIN: database.programs } })
    migrateDatabase(database, developmentBundles)
    say('Restored. Sign in again: sessions of the old installation do not go on.')
  }
  finally {
    database.stop()
    lock.release()
  }
})
