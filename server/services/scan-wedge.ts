import { and, desc, eq, isNull } from 'drizzle-orm'
import { formatIdentity } from '#shared/calibration/wedge/identity-code'
import { ComputeError } from '#shared/errors'
import type { Warning } from '#shared/schemas/curves'
import { db } from '../db/client'
import { wedges } from '../db/schema'
import { findBench } from './benches'
import type { ReadingRow } from './reading-view'
import { requireFound } from './revisions'
import { findWedge, findWedgeByCode, type WedgeRow } from './wedge-parts'

/** More of a bench's wedges than these are not looked for in a scan that was handed in without saying which. */
const mostCandidates = 30

/** The wedges that a scan may show: the one it was handed in for, or the bench's, newest first. */
export async function candidateWedges({ studioId, benchId, wedgeId }: ReadingRow): Promise<WedgeRow[]> {
  if (wedgeId) return [requireFound(await findWedge(db(), studioId, wedgeId))]
  return db().select().from(wedges).where(and(eq(wedges.studioId, studioId), eq(wedges.benchId, benchId), isNull(wedges.archivedAt))).orderBy(desc(wedges.id)).limit(mostCandidates)
}

/**
 * Which wedge the scan is read as. The code on the film decides; without one it is the wedge it was handed in for, or the bench's only one,
 * and that is said. Throws `other_wedge`, `wedge_unknown` or `code_unreadable`.
 */
export async function wedgeOfScan(row: ReadingRow, code: string | null, candidates: WedgeRow[]): Promise<{ wedge: WedgeRow, warnings: Warning[] }> {
  if (code === null) {
    const [only] = candidates
    if (only && candidates.length === 1) return { wedge: only, warnings: [unread(only, row.wedgeId !== null)] }
    throw new ComputeError('code_unreadable', candidates.length === 0
      ? 'No code could be read in this picture, and this bench has no wedge yet. Put a wedge on film for it first.'
      : 'The code beside the patches could not be read, so it is not known which wedge this is. Choose the wedge by hand, or scan again at 300 pixels per inch with the whole print in view.')
  }
  const asked = candidates.find(wedge => wedge.code === code)
  if (asked) return { wedge: asked, warnings: [] }
  const found = await findWedgeByCode(db(), row.studioId, code)
  if (!found) throw new ComputeError('wedge_unknown', `The code in this picture is ${formatIdentity(code)}, and this studio has no wedge of that code. Was the film made in another studio? Scan a print of one of your own wedges.`)
  if (found.benchId === row.benchId && row.wedgeId === null) return { wedge: found, warnings: [] }
  throw await otherWedge(row, found)
}

async function otherWedge(row: ReadingRow, found: WedgeRow): Promise<ComputeError> {
  const code = formatIdentity(found.code)
  if (found.benchId === row.benchId) return new ComputeError('other_wedge', `This picture shows wedge ${code}, another wedge of this bench. Hand it in there.`)
  const bench = await findBench(db(), row.studioId, found.benchId)
  return new ComputeError('other_wedge', `This picture shows wedge ${code} of the bench “${bench?.name ?? '?'}”. Hand it in there: a wedge tells about its own bench only.`)
}

const unread = ({ code }: WedgeRow, wasAsked: boolean): Warning => ({
  code: 'code_unreadable',
  message: `The code beside the patches could not be read, so this was taken to be wedge ${formatIdentity(code)}, ${wasAsked ? 'for which it was handed in' : 'the only one of this bench'}. Compare the code printed below it.`,
})
