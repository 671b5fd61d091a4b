import { and, eq } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import type { Process } from '#shared/schemas/benches'
import { db } from '../db/client'
import { curves } from '../db/schema'
import { hasRole, type StudioAccess } from './access'
import { findBench, type BenchRow } from './benches'
import { requireOwnPhoto, type PhotoRow } from './photos'
import { starterBench } from './starter-benches'

const notThere = (path: string, message: string) => new ComputeError('not_found', message, [{ path, message }])

export async function photoForNegative(studio: StudioAccess, id: string): Promise<PhotoRow> {
  const photo = await requireOwnPhoto(studio, id)
  if (photo.binnedAt) throw new ComputeError('wrong_state', 'This photo lies in the bin. Take it out, then make the negative.')
  return photo
}

/** The bench that is named, or the service's own one for the process. */
export async function benchForNegative(studio: StudioAccess, { benchId, process }: { benchId?: string, process?: Process }): Promise<BenchRow> {
  const bench = await findBench(db(), studio.id, benchId ?? await starterBenchId(studio, process!))
  if (!bench) throw notThere('benchId', 'There is no such bench in this studio.')
  if (bench.archivedAt) throw new ComputeError('wrong_state', 'This bench was put away. Choose another one.', [{ path: 'benchId', message: 'This bench was put away.' }])
  return bench
}

const starterBenchId = async (studio: StudioAccess, process: Process): Promise<string> =>
  (await db().transaction(tx => starterBench(tx, studio, process))).bench.id

/** A curve of the bench: the one in use, or the one that is named. Members work with curves in use only. */
export async function chooseCurve(studio: StudioAccess, benchId: string, wanted: string) {
  const which = wanted === 'in-use' ? eq(curves.state, 'in-use') : eq(curves.id, wanted)
  const [curve] = await db().select({ id: curves.id, state: curves.state, aim: curves.aim }).from(curves)
    .where(and(eq(curves.studioId, studio.id), eq(curves.benchId, benchId), which))
  if (!curve && wanted === 'in-use') throw new ComputeError('no_curve', 'This bench has no curve in use yet. Read a wedge and put its curve in use, or start from a process.')
  if (!curve) throw notThere('curveId', 'This bench has no such curve.')
  if (curve.state !== 'in-use' && !hasRole(studio.role, 'technician')) throw new ComputeError('role_too_low', 'Members make negatives with the curve in use. Ask a technician to put this one in use.')
  return curve
}
