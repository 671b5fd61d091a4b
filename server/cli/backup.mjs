import { join, resolve } from 'node:path'
import { bundlePrograms, developmentBundles } from './bundles.mjs'
import { openDatabaseServer } from './database.mjs'
import { ensureDependencies } from './dependencies.mjs'
import { readInstallation, serviceEnvironment } from './installation.mjs'
import { main, run, Stop } from './run.mjs'

// `npm run backup FOLDER`: while the service runs or not.

main(async () => {
  const folder = process.argv[2]
  if (!folder) throw new Stop('Say where to: npm run backup FOLDER')
  await ensureDependencies()
  await bundlePrograms(developmentBundles)
  const database = await openDatabaseServer()
  try {
    if (!database.programs) throw new Stop('pg_dump is missing here. Install PostgreSQL\'s client programs.')
    const env = serviceEnvironment({ databaseUrl: database.url, sessionPassword: readInstallation().sessionPassword })
    run(process.execPath, [join(developmentBundles, 'backup.mjs'), resolve(folder)], { env: { ...env, POSTGRES_BIN: database.programs } })
  }
  finally {
    if (!database.adopted) database.stop()
  }
})
