import { readSettings } from '../config'
import { openDatabase } from '../db/client'

export default defineNitroPlugin(() => {
  openDatabase(readSettings().DATABASE_URL)
})
