import { readSettings } from '../config'
import { startHints } from '../services/hint-hub'

export default defineNitroPlugin(() => {
  void startHints(readSettings().DATABASE_URL)
})
