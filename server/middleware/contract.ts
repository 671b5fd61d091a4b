import { ComputeError } from '#shared/errors'

/** Under /api only the contract's paths and methods exist; everything else is refused in its own error shape. */
export default defineEventHandler((event) => {
  const path = event.path.split('?', 1)[0]!
  if (path !== '/api' && !path.startsWith('/api/')) return
  const methods: string[] = methodsOf(path)
  if (!methods.length) return answerError(event, new ComputeError('not_found', 'There is nothing under this address.'))
  // Where it has no row of its own, HEAD goes the way of GET; Node leaves the body out by itself, since the answer was opened for a HEAD request.
  if (event.method === 'HEAD' && methods.includes('GET') && !methods.includes('HEAD')) {
    event.context.headOnly = true
    event.node.req.method = event._method = 'GET'
    return
  }
  if (!methods.includes(event.method)) {
    setResponseHeader(event, 'Allow', [...new Set(methods.includes('GET') ? [...methods, 'HEAD'] : methods)].join(', '))
    return answerError(event, new ComputeError('method_not_allowed', `Here one can only ${methods.join(', ')}.`))
  }
})

declare module 'h3' {
  interface H3EventContext { /** only the headers are wanted: a route may skip making the body */ headOnly?: boolean }
}
