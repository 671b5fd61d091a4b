import { and, eq } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import type { ReadAgain } from '#shared/schemas/scans'
import { db } from '../db/client'
import { readings } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { lockBench } from './benches'
import { findReading, requireReadable, requireUnused } from './readings'
import { requireFound } from './revisions'
import { enqueueReading, requireScanner, type ScanAnswer } from './scan-intake'
import { doneOrNot } from './scan-waiting'
import { findWedge } from './wedge-parts'

/** Has a stored scan read once more; what the body leaves out stays as it was. A reading that something rests on stays as it is. */
export async function readAgain(studio: StudioAccess, id: string, { scannerId, wedgeId, ...changes }: ReadAgain, requestId: string | undefined): Promise<ScanAnswer> {
  const row = await db().transaction(async (tx) => {
    const { benchId } = requireFound(await findReading(tx, studio.id, id))
    requireReadable(await lockBench(tx, studio.id, benchId))
    const reading = requireFound(await findReading(tx, studio.id, id))
    if (reading.fileBytes === null) throw new ComputeError('wrong_state', 'These values were typed in; there is no scan to read again.')
    if (reading.state !== 'ready' && reading.state !== 'failed') throw new ComputeError('wrong_state', 'This scan is still being read. Wait until that is done.')
    await requireUnused(tx, reading, 'it stays as it was read. Scan the print once more to read it otherwise')
    if (scannerId) await requireScanner(tx, studio.id, scannerId)
    if (wedgeId && (await findWedge(tx, studio.id, wedgeId))?.benchId !== benchId) throw new ComputeError('invalid_input', 'This bench has no such wedge.', [{ path: 'wedgeId', message: 'Choose a wedge of this bench.' }])
    const order = Object.fromEntries(Object.entries({ ...reading.order, ...changes }).filter(([, value]) => value !== null && value !== undefined))
    const [again] = await tx.update(readings).set({
      state: 'waiting', progress: 0, failures: 0, errorCode: null, errorMessage: null, readyAt: null, order, requestId: requestId?.slice(0, 64),
      ...scannerId === undefined ? {} : { scannerId }, ...wedgeId ? { wedgeId } : {}, ...wedgeId || changes.printNumber !== undefined ? { wedgePrintId: null } : {},
    }).where(and(eq(readings.studioId, studio.id), eq(readings.id, id))).returning()
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'readings.read-again', recordId: id })
    await enqueueReading(tx, again!)
    return again!
  })
  const { isDone, item } = await doneOrNot(row, 'keep')
  return { status: isDone ? 200 : 202, item }
}
