import { closeDatabase } from '../db/client'
import { log } from '../log'
import { stopHints } from '../services/hint-hub'
import { noteStopping } from '../services/health'
import { closeImageChildren } from '../services/image-child'

/**
 * The order of an end: say that we aren't ready and end the event streams (an open one would keep its connection);
 * Nitro meanwhile accepts nothing new and waits for answers, ten seconds at most; then the child, then the database.
 */
export default defineNitroPlugin((nitro) => {
  process.env.NITRO_SHUTDOWN_TIMEOUT ??= '10000'
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.once(signal, () => {
      noteStopping()
      void stopHints()
    })
  }
  nitro.hooks.hook('close', async () => {
    await closeImageChildren()
    await closeDatabase()
    log('info', 'web.stopped')
  })
})
