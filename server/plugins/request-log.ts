import { log, takeOverConsole } from '../log'
import { countRequest } from '../metrics'

/** Gives every request an id, and logs and counts it when its answer has gone out. */
export default defineNitroPlugin((nitro) => {
  if (!import.meta.dev) takeOverConsole()
  nitro.hooks.hook('request', (event) => {
    const started = performance.now()
    const requestId = event.context.requestId = crypto.randomUUID()
    setResponseHeader(event, 'X-Request-Id', requestId)
    event.node.res.once('close', () => {
      const { statusCode: status, writableFinished: whole } = event.node.res
      const path = event.path.split('?')[0]!
      const route = event.context.matchedRoute?.path ?? (path.startsWith('/_') ? '/_assets' : '/pages')
      const seconds = (performance.now() - started) / 1000
      countRequest(event.method, route, status, seconds)
      const level = route === '/_assets' || path.startsWith('/api/health') || path === '/metrics' ? 'debug' : 'info'
      log(level, 'request', { requestId, method: event.method, route, path: route === '/_assets' ? undefined : path, status, milliseconds: Math.round(seconds * 1000), cutShort: whole ? undefined : true })
    })
  })
  nitro.hooks.hook('error', (error, { event }) => {
    log('error', 'request.error', { requestId: event?.context.requestId, error })
  })
})

declare module 'h3' {
  interface H3EventContext { requestId: string }
}
