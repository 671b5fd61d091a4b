import { readSettings } from '../config'
import { openStorage, type Storage } from '../storage'

let opened: Storage | undefined

/** The process's one storage. */
export const storage = (): Storage => opened ??= openStorage(readSettings().STORAGE_DIR)
