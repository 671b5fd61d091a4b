import type { H3Event } from 'h3'
import { getHeader, setResponseStatus } from 'h3'
import { limits } from '#shared/schemas/limits'
import type { Reading } from '#shared/schemas/curves'
import { scanFields } from '#shared/schemas/scans'
import type { StudioAccess } from '../services/access'
import { roomFor } from '../services/room'
import { newReadingId, type ScanPlace, takeScan } from '../services/scan-intake'
import { storage } from '../services/storage'
import { discardAll, receiveFiles } from './receive-files'

/** Streams a scan and its fields in, and answers its reading: two addresses take scans. */
export async function receiveScan(event: H3Event, studio: StudioAccess, place: ScanPlace): Promise<Reading> {
  const room = await roomFor(studio, Number(getHeader(event, 'content-length') ?? 0))
  const sent: Record<string, string> = {}
  const received = await receiveFiles(event, {
    field: 'scan', maxFiles: 1, maxFileBytes: limits.fileMaxBytes, newId: newReadingId,
    openTemporary: () => storage().temporary('scan'),
    takeRoom: room.take,
    onField: (name, value) => sent[name] = value,
  })
  try {
    const { status, item } = await takeScan(studio, place, received, scanFields.parse(sent), event.context.requestId)
    setResponseStatus(event, status)
    return item
  }
  finally {
    await discardAll(received)
  }
}
