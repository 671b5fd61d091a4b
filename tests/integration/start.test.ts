import { spawn } from 'node:child_process'
import { existsSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { chmod } from 'node:fs/promises'
import { join } from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { root } from '../../server/cli/paths.mjs'
import { freePort, openCluster } from '../../server/cli/postgres.mjs'
import { birthOf } from '../../server/cli/processes.mjs'
import { newFolder } from '../support/house'

/** An installation of this test's own, in a folder that the database's user can reach. */
async function newInstallation() {
  const data = newFolder()
  await chmod(data, 0o755)
  const port = String(await freePort())
  const { DATABASE_URL: _, ...environment } = process.env
  const start = () => {
    const child = spawn(process.execPath, [join(root, 'server/cli/start.mjs')], { env: { ...environment, DATA_DIR: data, PORT: port }, detached: true })
    let text = ''
    for (const stream of [child.stdout, child.stderr]) stream.on('data', chunk => text += chunk)
    const exited = new Promise<number | null>(resolve => child.once('exit', code => resolve(code)))
    const serving = () => expect.poll(() => text, { timeout: 120_000, interval: 200 }).toContain('Ctrl-C stops everything')
    onTestFinished(async () => {
      child.kill('SIGTERM')
      await exited
    })
    return { child, exited, serving, text: () => text }
  }
  const read = (name: string) => JSON.parse(readFileSync(join(data, name), 'utf8'))
  const serverPid = () => Number(readFileSync(join(data, 'postgres/postmaster.pid'), 'utf8').split('\n')[0])
  return { data, start, read, serverPid, isReady: () => fetch(`http://127.0.0.1:${port}/api/health/ready`).then(answer => answer.ok, () => false) }
}

describe('the start command', () => {
  it('serves, refuses a second one, goes on after kill -9 with the same cluster, and stops all that it started', async () => {
    const { data, start, read, serverPid, isReady } = await newInstallation()
    const first = start()
    await first.serving()
    expect(await isReady()).toBe(true)
    const demo = read('installation.json').demo
    expect(first.text()).toContain(demo.password)
    for (const name of ['installation.json', 'postgres.json']) expect(statSync(join(data, name)).mode & 0o777).toBe(0o600)

    const besides = start()
    expect(await besides.exited).toBe(1)
    expect(besides.text()).toContain('already runs')
    expect(await isReady()).toBe(true)

    const orphans: { pid: number, birth: string }[] = read('running.json').children
    const server = serverPid()
    first.child.kill('SIGKILL')
    await first.exited
    expect(orphans).toHaveLength(3) // web, worker, and the local mailbox
    expect(orphans.every(({ pid, birth }) => birthOf(pid) === birth)).toBe(true)

    const second = start()
    await second.serving()
    expect(serverPid()).toBe(server)
    expect(orphans.filter(({ pid, birth }) => birthOf(pid) === birth)).toEqual([])
    expect(second.text()).toContain(demo.password)

    const children: { pid: number, birth: string }[] = read('running.json').children
    second.child.kill('SIGINT')
    expect(await second.exited).toBe(0)
    expect(children.filter(({ pid, birth }) => birthOf(pid) === birth)).toEqual([])
    expect(birthOf(server)).toBeUndefined()
    expect(existsSync(join(data, 'running.json'))).toBe(false)
  }, 300_000)
})

describe('the cluster', () => {
  const places = async () => {
    const data = newFolder()
    await chmod(data, 0o755)
    return { folder: join(data, 'postgres'), keep: join(data, 'postgres.json'), settings: { fsync: 'off' } }
  }

  it('keeps its data, port and passwords over a stop, and starts although its old number belongs to another program', async () => {
    const place = await places()
    const made = await openCluster(place)
    made.sql('emulside', 'create table kept (n int); insert into kept values (7)')
    const pidFile = join(place.folder, 'postmaster.pid')
    const lines = readFileSync(pidFile, 'utf8').split('\n')
    made.stop()
    // As a power cut leaves it, with our own number in place of the server's.
    writeFileSync(pidFile, [process.pid, ...lines.slice(1)].join('\n'))
    const again = await openCluster(place)
    onTestFinished(() => again.stop())
    expect(again.adopted).toBe(false)
    expect(again.url).toBe(made.url)
    expect(again.sql('emulside', 'select n from kept')).toBe('7')
    const adopted = await openCluster(place)
    expect(adopted.adopted).toBe(true)
  }, 60_000)

  it('of another PostgreSQL version is refused and left as it is', async () => {
    const place = await places()
    const made = await openCluster(place)
    made.stop()
    const version = readFileSync(join(place.folder, 'PG_VERSION'), 'utf8')
    writeFileSync(join(place.folder, 'PG_VERSION'), '9\n')
    await expect(openCluster(place)).rejects.toThrow(/was made by PostgreSQL 9.*Nothing was changed/s)
    expect(readFileSync(join(place.folder, 'PG_VERSION'), 'utf8')).toBe('9\n')
    writeFileSync(join(place.folder, 'PG_VERSION'), version)
    const again = await openCluster(place)
    again.stop()
  }, 60_000)
})
