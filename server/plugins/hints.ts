import { readSettings } from '../config'
import { startHints, stopHints } from '../services/hint-hub'

export default defineNitroPlugin((nitro) => {
  void startHints(readSettings().DATABASE_URL)
  nitro.hooks.hook('close', stopHints)
})
