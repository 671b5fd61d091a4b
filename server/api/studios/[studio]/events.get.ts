import { peopleEndpoints } from '#shared/schemas/people'
import { readSettings } from '../../../config'
import { joinHints } from '../../../services/hint-hub'

const aliveSeconds = 25

export default defineRoute(peopleEndpoints.events, async ({ event, person, studio }) => {
  const stream = createEventStream(event)
  const leave = joinHints({
    studioId: studio.id, personId: person.id, sessionId: person.sessionId,
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
