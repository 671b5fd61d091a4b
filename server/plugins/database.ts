import { readSettings } from '../config'
import { closeDatabase, openDatabase } from '../db/client'

export default defineNitroPlugin((nitro) => {
  openDatabase(readSettings().DATABASE_URL)
  nitro.hooks.hook('close', closeDatabase)
})
