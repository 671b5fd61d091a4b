import { rmSync } from 'node:fs'
import { join } from 'node:path'
import { onTestFinished } from 'vitest'
import { builtPrograms } from '../../server/cli/paths.mjs'
import { startWeb, startWorker } from './application'
import { connect, newDatabase, newFolder } from './house'
import { newStudio } from './studio'

/**
 * A database and a storage folder of one test's own, with the processes that it starts: for tests that kill them.
 * What still runs when the test has finished is killed, and the files go.
 */
export async function ownInstallation() {
  const databaseUrl = await newDatabase('migrated')
  const client = await connect(databaseUrl)
  const folder = newFolder()
  const storage = join(folder, 'storage')
  const running: { kill: () => void }[] = []
  const settings = (env: Record<string, string>) => ({ programs: builtPrograms, databaseUrl, storage, env })
  const keep = <P extends { kill: () => void }>(process: P): P => {
    running.push(process)
    return process
  }
  onTestFinished(() => {
    for (const process of running) process.kill()
    rmSync(folder, { recursive: true, force: true })
  })
  return {
    databaseUrl,
    storage,
    inStorage: (...parts: string[]) => join(storage, ...parts),
    web: async (env: Record<string, string> = {}) => keep(await startWeb(settings(env))),
    worker: (env: Record<string, string> = {}) => keep(startWorker(settings(env))),
    studioAt: (web: { address: string }) => newStudio(undefined, web.address),
    rows: async (text: string, values: unknown[] = []) => (await client.query(text, values)).rows,
  }
}
