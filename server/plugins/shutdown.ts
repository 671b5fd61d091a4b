import { log } from '../log'
import { noteStopping } from '../services/health'

/** First of all the service says that it isn't ready; Nitro stops accepting, waits for answers, and calls `close`. */
export default defineNitroPlugin((nitro) => {
  for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, noteStopping)
  nitro.hooks.hook('close', () => log('info', 'web.stopped'))
})
