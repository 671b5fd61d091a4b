import { spawnSync } from 'node:child_process'
import { describe, expect, inject, it } from 'vitest'
import { webProgram } from '../../server/cli/paths.mjs'
import { newFolder, runProgram } from '../support/house'

const good = () => ({
  DATABASE_URL: inject('databaseUrl'), STORAGE_DIR: newFolder(), IMAGE_CHILD_PROGRAM: 'image-child.mjs',
  NUXT_SESSION_PASSWORD: 'only-for-tests-only-for-tests-only', HOST: '127.0.0.1', PORT: '3999',
})

describe('a wrong setting', () => {
  it.each([['PORT', '70000'], ['LEASE_SECONDS', 'soon'], ['DATABASE_URL', 'mysql://elsewhere'], ['NUXT_SESSION_PASSWORD', 'short']])('%s stops the worker, which names it', async (name, value) => {
    const ended = await runProgram('worker', [], { ...good(), [name]: value })
    expect(ended.status).toBe(1)
    expect(ended.text).toContain(name)
  })

  it.each([['LEASE_SECONDS', 'soon'], ['STORAGE_DIR', '']])('%s stops web, which names it', (name, value) => {
    const ended = spawnSync(process.execPath, [webProgram], { env: { ...process.env, ...good(), [name]: value }, encoding: 'utf8', timeout: 15_000 })
    expect(ended.signal).toBeNull()
    expect(ended.status).not.toBe(0)
    expect(ended.stdout + ended.stderr).toContain(name)
  })
})
