import { and, desc, eq, isNotNull, ne } from 'drizzle-orm'
import { printLikeness, samePrintFrom } from '#shared/calibration/reading/same-print'
import { centreOf, type WedgePage } from '#shared/calibration/wedge/page'
import type { Warning } from '#shared/schemas/curves'
import type { Transaction } from '../db/client'
import { readings, wedgePrints, type StoredPatch } from '../db/schema'
import type { StudioAccess } from './access'
import type { ReadingRow } from './reading-view'
import type { WedgeRow } from './wedge-parts'
import { findOrMakeWedgePrint } from './wedge-prints'

/** A wedge's newest prints that a new reading is compared with. */
const comparedReadings = 30

interface ReadScan { row: ReadingRow, wedge: WedgeRow, page: WedgePage, patches: StoredPatch[] }

/**
 * The wedge print that a scan belongs to: the one whose number the person gave. Without a number, the print that an earlier scan shows
 * with the same coating; else a print that was noted but not scanned yet; else a new one.
 */
export async function printOfScan(tx: Transaction, { row, wedge, page, patches }: ReadScan): Promise<{ wedgePrintId: string, warnings: Warning[] }> {
  const studio = { id: row.studioId, personId: row.createdBy } as StudioAccess
  const others = await otherReadings(tx, row, wedge)
  const alike = mostAlike(page, patches, others)
  const { printNumber } = row.order
  if (printNumber !== undefined) {
    const print = await findOrMakeWedgePrint(tx, studio, wedge, printNumber)
    return { wedgePrintId: print.id, warnings: alike && alike.number !== printNumber ? [looksLike(alike.number, printNumber)] : [] }
  }
  if (row.wedgePrintId) return { wedgePrintId: row.wedgePrintId, warnings: [] }
  if (alike) return { wedgePrintId: alike.wedgePrintId, warnings: [samePrint(alike.number)] }
  const prints = await tx.select({ id: wedgePrints.id, number: wedgePrints.number }).from(wedgePrints)
    .where(and(eq(wedgePrints.studioId, row.studioId), eq(wedgePrints.wedgeId, wedge.id))).orderBy(desc(wedgePrints.number))
  const unread = prints.find(({ id }) => others.every(other => other.wedgePrintId !== id))
  if (unread) return { wedgePrintId: unread.id, warnings: [] }
  return { wedgePrintId: (await findOrMakeWedgePrint(tx, studio, wedge, (prints[0]?.number ?? 0) + 1)).id, warnings: [] }
}

interface OtherReading { wedgePrintId: string, number: number, patches: StoredPatch[] }

async function otherReadings(tx: Transaction, row: ReadingRow, wedge: WedgeRow): Promise<OtherReading[]> {
  const rows = await tx.select({ wedgePrintId: wedgePrints.id, number: wedgePrints.number, patches: readings.patches }).from(readings)
    .innerJoin(wedgePrints, and(eq(wedgePrints.studioId, readings.studioId), eq(wedgePrints.id, readings.wedgePrintId)))
    .where(and(eq(readings.studioId, row.studioId), eq(readings.wedgeId, wedge.id), eq(readings.state, 'ready'), isNotNull(readings.fileSha256), ne(readings.id, row.id)))
    .orderBy(desc(readings.id)).limit(comparedReadings)
  return rows
}

function mostAlike(page: WedgePage, patches: StoredPatch[], others: OtherReading[]): OtherReading | undefined {
  const places = page.patches.map((patch) => {
    const [x, y] = centreOf(patch)
    return { x: 2 * x / page.widthMm - 1, y: 2 * y / page.heightMm - 1 }
  })
  const likeness = others.map(other => printLikeness(places, patches, other.patches) ?? 0)
  const best = Math.max(0, ...likeness)
  return best >= samePrintFrom ? others[likeness.indexOf(best)] : undefined
}

const samePrint = (number: number): Warning => ({
  code: 'same_print', message: `The coating is that of wedge print ${number}, so this counts as another scan of that print: both together are one sample. If it is another print, give its number and have it read again.`,
})
const looksLike = (number: number, given: number): Warning => ({
  code: 'looks_like_print', message: `You called this wedge print ${given}, but its coating looks like that of wedge print ${number}. One print counted twice makes a curve seem surer than it is: compare the two, and correct the number if it is the same sheet.`,
})
