import { join } from 'node:path'
import { bundlePrograms, developmentBundles } from './bundles.mjs'
import { openDatabaseServer } from './database.mjs'
import { ensureDependencies } from './dependencies.mjs'
import { readInstallation, serviceEnvironment } from './installation.mjs'
import { main, run } from './run.mjs'

// `npm run check-storage [-- --sizes]`: while the service runs or not.

main(async () => {
  await ensureDependencies()
  await bundlePrograms(developmentBundles)
  const database = await openDatabaseServer()
  try {
    const env = serviceEnvironment({ databaseUrl: database.url, sessionPassword: readInstallation().sessionPassword })
    run(process.execPath, [join(developmentBundles, 'check-storage.mjs'), ...process.argv.slice(2)], { env })
  }
  finally {
    if (!database.adopted) database.stop()
  }
})
