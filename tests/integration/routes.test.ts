import { readdirSync } from 'node:fs'
import { beforeAll, describe, expect, it } from 'vitest'
import { contract } from '../../shared/schemas/contract'
import type { Endpoint } from '../../shared/schemas/endpoint'
import { errorAnswer } from '../../shared/schemas/primitives'
import { roles } from '../../shared/schemas/people'
import { Agent } from '../support/studio'
import { routeTable } from './route-table'
import type { GoodCall, RouteCase } from './routes/route-case'
import { makeWorld, type World } from './routes/world'

const handlers = readdirSync('server/api', { recursive: true, withFileTypes: true }).filter(entry => entry.isFile())
  .map(entry => `${entry.parentPath}/${entry.name}`.replace(/^server\/api\//, '')).sort()

/** `studios/[studio]/index.get.ts` → `GET /api/studios/:studio` */
const addressOf = (file: string): string => {
  const [, path, method] = /^(.*)\.(\w+)\.ts$/.exec(file)!
  return `${method!.toUpperCase()} ${`/api/${path}`.replace(/\/index$/, '').replaceAll(/\[(\w+)\]/g, ':$1')}`
}
const nobodysId = '018f0000-0000-7000-8000-000000000000'

describe('the route table', () => {
  it('has a row for every handler, and no row without one', () => {
    expect(routeTable.map(route => route.file).sort()).toEqual(handlers)
  })
  it('covers the contract: every row of it has its handler, at its address', () => {
    expect(handlers.map(addressOf).sort()).toEqual(Object.values(contract).map(row => `${row.method} ${row.path}`).sort())
    for (const { file, row } of routeTable) expect(`${contract[row].method} ${contract[row].path}`).toBe(addressOf(file))
  })
})

let world: World
beforeAll(async () => {
  world = await makeWorld()
})

for (const route of routeTable) describe(route.file, () => {
  const row: Endpoint = contract[route.row]
  const role = roles.find(name => name === row.access)
  const idParams = [...row.path.matchAll(/:(\w+)/g)].map(([, name]) => name!).filter(name => name !== 'studio' && name !== 'shelf')

  it('does it for who may', async () => {
    const call = await route.good(world)
    const answer = await send(await callerFor(row, route), row, call, route)
    expect(answer.status, answer.text).toBe(call.status ?? 200)
  })

  if (row.access !== 'public') it('asks a stranger to sign in', async () => {
    await expectRefusal(await send(world.anonymous, row, await route.good(world)), 401, 'not_signed_in')
  })

  if (role !== undefined) it('is not there for people of other studios', async () => {
    await expectRefusal(await send(world.outsider.agent, row, await route.good(world)), 404, 'not_found')
  })

  if (idParams.length > 0) it('does not reach another studio’s record', async () => {
    const call = await route.good(world)
    await expectRefusal(await send(world.outsider.agent, row, { ...call, params: { ...call.params, studio: world.outsider.ids.studio } }), 404, 'not_found')
  })

  if (role === 'technician' || role === 'owner') it('is refused to a role too low', async () => {
    const tooLow = role === 'owner' ? world.technician : world.member
    await expectRefusal(await send(tooLow.agent, row, await route.good(world)), 403, 'role_too_low')
  })

  if (idParams.length > 0) it('finds nothing under ids that are none, or nobody’s', async () => {
    const call = await route.good(world)
    for (const wrong of ['not-an-id', '%00', nobodysId]) {
      await expectRefusal(await send(world.owner.agent, row, { ...call, params: { ...call.params, [idParams.at(-1)!]: wrong } }), 404, 'not_found')
    }
  })

  if (row.query) it('refuses a query that it does not know', async () => {
    const call = await route.good(world)
    await expectRefusal(await send(await callerFor(row, route), row, { ...call, query: { ...call.query, unheardOf: '1' } }), 422, 'invalid_input')
  })

  if (row.body) it('refuses a body that it does not know, or can’t read', async () => {
    const { json, ...call } = await route.good(world)
    const caller = await callerFor(row, route)
    const sendText = (body: string) => send(caller, row, { ...call, body, headers: { 'content-type': 'application/json' } })
    await expectRefusal(await sendText('{"name": '), 400, 'malformed_body')
    await expectRefusal(await sendText(''), 400, 'malformed_body')
    await expectRefusal(await sendText('[]'), 422, 'invalid_input')
    await expectRefusal(await sendText(`{"__proto__": {"role": "owner"}, ${JSON.stringify(json).slice(1)}`), 422, 'invalid_input')
    await expectRefusal(await send(caller, row, { ...call, json: { ...json as object, unheardOf: 1 } }), 422, 'invalid_input')
    await expectRefusal(await send(caller, row, { ...call, body: 'name=x', headers: { 'content-type': 'application/x-www-form-urlencoded' } }), 415, 'unsupported_media')
  })

  for (const { why, call } of route.bad ?? []) it(`refuses ${why}`, async () => {
    const { status, code, ...changes } = call(world)
    const good = await route.good(world)
    const answer = await send(await callerFor(row, route), row, { ...good, ...changes, params: { ...good.params, ...changes.params } })
    await expectRefusal(answer, status, code)
  })

  if (!['GET', 'HEAD', 'OPTIONS'].includes(row.method)) it('refuses what another site’s page sends', async () => {
    const call = await route.good(world)
    await expectRefusal(await send(world.owner.agent, row, { ...call, headers: { ...call.headers, origin: 'https://elsewhere.example' } }), 403, 'foreign_origin')
    await expectRefusal(await send(world.owner.agent, row, { ...call, headers: { ...call.headers, 'sec-fetch-site': 'cross-site' } }), 403, 'foreign_origin')
  })
})

/** Somebody who may: a stranger for sign-in itself, so that the world's own sessions stay. */
async function callerFor({ access }: Endpoint, { caller }: RouteCase): Promise<Agent> {
  if (caller) return await caller(world)
  if (access === 'public') return new Agent()
  return { member: world.member, technician: world.technician }[access as string]?.agent ?? world.owner.agent
}

interface Sent { status: number, text: string, json: () => unknown, /** an answer without a body by its method */ headOnly: boolean }

async function send(agent: Agent, row: Endpoint, { params, query, status: _, ...options }: GoodCall, { endless }: Partial<RouteCase> = {}): Promise<Sent> {
  const values: Record<string, string> = { studio: world.owner.ids.studio, ...params }
  const path = row.path.replaceAll(/:(\w+)/g, (_, name: string) => values[name]!)
  const response = await agent.fetch(row.method, query ? `${path}?${new URLSearchParams(query)}` : path, options)
  const text = endless && response.ok ? await firstChunk(response) : await response.text()
  return { status: response.status, text, json: () => JSON.parse(text), headOnly: row.method === 'HEAD' }
}

async function firstChunk(response: Response): Promise<string> {
  const reader = response.body!.getReader()
  const { value } = await reader.read()
  await reader.cancel()
  return new TextDecoder().decode(value)
}

async function expectRefusal(answer: Sent, status: number, code: string): Promise<void> {
  expect(answer.status, answer.text).toBe(status)
  if (answer.headOnly) return
  const error = errorAnswer.strict().parse(answer.json())
  expect(error).toMatchObject({ statusCode: status, data: { code } })
  expect(error.message).toMatch(/\.$/)
}
