import { peopleEndpoints, type Role } from '#shared/schemas/people'
import { readSettings } from '../../../config'
import { enterStudio } from '../../../services/access'
import { joinHints } from '../../../services/hint-hub'
import type { H3Event } from 'h3'
import { ComputeError } from '#shared/errors'

const aliveSeconds = 25

export default defineRoute(peopleEndpoints.events, async ({ event, person, studio }) => {
  const stream = createEventStream(event)
  const leave = joinHints({
    studioId: studio.id, personId: person.id, role: studio.role,
    mayListen: () => roleNow(event, studio.id),
    resync: () => void stream.push({ event: 'resync', data: '{}' }),
    send: hint => void stream.push(JSON.stringify(hint)),
    end: () => void stream.close(),
  }, readSettings().HINT_RECHECK_SECONDS)
  // Proxies end connections on which nothing is said for long.
  const alive = setInterval(() => void stream.push({ event: 'alive', data: '{}' }), aliveSeconds * 1000)
  stream.onClosed(() => {
    clearInterval(alive)
    leave()
  })
  setResponseHeader(event, 'X-Accel-Buffering', 'no')
  await stream.send()
})

/** None once the session, the token or the membership has ended; throws when that can't be told. */
async function roleNow(event: H3Event, studioId: string): Promise<Role | undefined> {
  try {
    return (await enterStudio(await requirePerson(event), studioId, 'member')).role
  }
  catch (error) {
    if (error instanceof ComputeError) return undefined
    throw error
  }
}
