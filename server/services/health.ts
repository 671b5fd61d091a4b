import { access, constants, mkdir } from 'node:fs/promises'
import { sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'
import { db } from '../db/client'

let stopping = false

/** From now on the service answers that it isn't ready, so that nobody sends it new work. */
export function noteStopping(): void {
  stopping = true
}

/** Throws `unavailable` unless database and storage answer and the service isn't about to stop. */
export async function requireReady(): Promise<void> {
  if (stopping) throw new ComputeError('unavailable', 'The service is about to stop.')
  await db().execute(sql`select 1`).catch(() => {
    throw new ComputeError('unavailable', 'The database does not answer.')
  })
  const { STORAGE_DIR } = readSettings()
  await mkdir(STORAGE_DIR, { recursive: true }).then(() => access(STORAGE_DIR, constants.W_OK)).catch(() => {
    throw new ComputeError('unavailable', 'The storage folder cannot be written.')
  })
}
