import { describe, expect, it } from 'vitest'
import { connect, newDatabase, runProgram } from '../support/house'

const migrate = (url: string, ...args: string[]) => runProgram('migrate', args, { DATABASE_URL: url })
const check = async (url: string) => JSON.parse((await migrate(url, '--check')).text)

describe('the migrate step', () => {
  it('brings an empty database up to date, and changes nothing the second time', async () => {
    const url = await newDatabase('empty')
    const waiting = await check(url)
    expect(waiting.applied).toBe(0)
    expect(waiting.pending.length).toBeGreaterThan(0)
    expect((await migrate(url)).status).toBe(0)
    expect(await check(url)).toEqual({ pending: [], applied: waiting.pending.length })
    expect((await migrate(url)).status).toBe(0)
    expect(await check(url)).toEqual({ pending: [], applied: waiting.pending.length })
  })

  it('is done once when two processes come at the same time', async () => {
    const url = await newDatabase('empty')
    const both = await Promise.all([migrate(url), migrate(url)])
    expect(both.map(ended => ended.status)).toEqual([0, 0])
    const client = await connect(url)
    const { rows } = await client.query('select count(*)::int as n, count(distinct hash)::int as different from drizzle.__drizzle_migrations')
    expect(rows[0].n).toBe(rows[0].different)
  })

  it('refuses a database that a newer version has migrated', async () => {
    const url = await newDatabase('migrated')
    const client = await connect(url)
    await client.query(`insert into drizzle.__drizzle_migrations (hash, created_at) values ('of-a-newer-version', ${Date.now()})`)
    const ended = await migrate(url)
    expect(ended.status).toBe(1)
    expect(ended.text).toMatch(/newer version/)
  })

  it('refuses a database with another history and leaves it alone', async () => {
    const url = await newDatabase('migrated')
    const client = await connect(url)
    await client.query(`update drizzle.__drizzle_migrations set hash = 'of-something-else' where id = 1`)
    const ended = await migrate(url)
    expect(ended.status).toBe(1)
    expect(ended.text).toMatch(/Nothing was changed/)
  })

  it('runs as a role that is no superuser', async () => {
    const client = await connect(await newDatabase('migrated'))
    const { rows } = await client.query('select rolsuper, rolcreatedb, rolcreaterole from pg_roles where rolname = current_user')
    expect(rows).toEqual([{ rolsuper: false, rolcreatedb: false, rolcreaterole: false }])
  })
})
