import type { Server } from 'node:http'

/** Longer than browsers, proxies and scripts keep an idle connection: it is theirs to end, never ours just as they use it again. */
const idleMs = 75_000

export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('request', (event) => {
    const { server } = event.node.req.socket as { server?: Server }
    if (server) server.keepAliveTimeout = idleMs
  })
})
