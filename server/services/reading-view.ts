import { and, eq, type SQL } from 'drizzle-orm'
import type { Reading } from '#shared/schemas/curves'
import type { Queryable } from '../db/client'
import { readings, wedgePrints } from '../db/schema'

export type ReadingRow = typeof readings.$inferSelect

/** Readings as they are shown, each with the number of its wedge print. */
export async function readReadings(on: Queryable, where: SQL | undefined, order?: SQL, limit = 1): Promise<Reading[]> {
  const rows = on.select({ reading: readings, number: wedgePrints.number }).from(readings)
    .leftJoin(wedgePrints, and(eq(wedgePrints.studioId, readings.studioId), eq(wedgePrints.id, readings.wedgePrintId))).where(where).limit(limit)
  return (await (order ? rows.orderBy(order) : rows)).map(({ reading, number }) => showReading(reading, number))
}

export const showReading = (row: ReadingRow, printNumber: number | null): Reading => {
  const { id, benchId, state, quality, unit, zero, paperLightness, corners, patches, warnings, createdAt, wedgeId, wedgePrintId, scannerId, scannerProfileId, progress, errorCode, errorMessage, evidence } = row
  return {
    id, benchId, state, quality, unit, zero, paperLightness, corners, patches, warnings, createdAt: createdAt.toISOString(),
    wedgeId, wedgePrintId, printNumber, scannerId, scannerProfileId, progress, error: errorCode === null ? null : { code: errorCode, message: errorMessage ?? '' }, evidence,
    file: row.fileBytes === null ? null : { name: row.fileName ?? '', bytes: row.fileBytes, format: row.fileFormat, width: row.fileWidth, height: row.fileHeight },
  }
}
