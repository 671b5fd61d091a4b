import { spawnSync } from 'node:child_process'
import { join } from 'node:path'
import { builtPrograms, inData } from '../../server/cli/paths.mjs'
import { openCluster } from '../../server/cli/postgres.mjs'

const template = 'emulside_template'

/** A cluster for tests only, in a folder of its own: nothing in it survives a power cut, and nothing has to. */
export async function openTestCluster() {
  const cluster = await openCluster({
    folder: inData('test-postgres'), keep: inData('test-postgres.json'), role: 'emulside_test', database: 'scratch',
    settings: { fsync: 'off', synchronous_commit: 'off', full_page_writes: 'off', max_connections: '200' },
  })
  const recreate = (name: string, like = 'template1') => cluster.sql('postgres', `
    drop database if exists ${name} with (force);
    create database ${name} owner emulside_test template ${like};`)
  recreate(template)
  migrate(cluster.urlOf(template))
  return {
    urlOf: cluster.urlOf,
    superuserUrl: cluster.superuserUrl,
    stop: cluster.stop,
    /** a fresh copy of the migrated template; answers its address */
    cloneTemplate(name: string) {
      recreate(name, template)
      return cluster.urlOf(name)
    },
  }
}

function migrate(url: string) {
  const ended = spawnSync(process.execPath, [join(builtPrograms, 'migrate.mjs')], { env: { ...process.env, DATABASE_URL: url }, encoding: 'utf8' })
  if (ended.status !== 0) throw new Error(`The template could not be migrated: ${ended.stderr}`)
}
