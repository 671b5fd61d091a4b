import { sql } from 'drizzle-orm'
import { db } from '../db/client'
import { renders } from '../db/schema'
import { metricsText } from '../metrics'

const loopback = /^(::ffff:)?127\.|^::1$/
const forwarding = ['x-forwarded-for', 'x-real-ip', 'forwarded', 'via']

/** For a monitor on this machine; nobody else, and nothing that came through a proxy, gets an answer. */
export default defineEventHandler(async (event) => {
  const local = loopback.test(event.node.req.socket.remoteAddress ?? '') && !forwarding.some(name => getHeader(event, name))
  if (!local) throw createError({ statusCode: 404, statusMessage: 'Not found' })
  const rows = await db().select({ state: renders.state, n: sql<number>`count(*)::int` }).from(renders).groupBy(renders.state)
  setResponseHeader(event, 'Content-Type', 'text/plain; version=0.0.4; charset=utf-8')
  return metricsText(Object.fromEntries(rows.map(({ state, n }) => [state, n])))
})
