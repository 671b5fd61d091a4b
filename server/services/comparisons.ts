import { and, desc, eq } from 'drizzle-orm'
import { benchFigures, compareBenches } from '#shared/calibration/compare-benches'
import { ComputeError } from '#shared/errors'
import type { Comparison } from '#shared/schemas/calibration'
import { db } from '../db/client'
import { curves, films, inkjets, lamps, papers, sensitizers } from '../db/schema'
import type { StudioAccess } from './access'
import { findBench, type BenchRow } from './benches'
import { evennessOfReading, newestPrints } from './evenness'
import { requireFound } from './revisions'

type Compared = Comparison['benches'][number]

/** Two benches on the same axes, by the curve in use of each, else the newest that was measured. */
export async function comparisonOf(studio: StudioAccess, benchId: string, otherId: string): Promise<Comparison> {
  const [first, second] = [requireFound(await findBench(db(), studio.id, benchId)), await findBench(db(), studio.id, otherId)]
  if (!second || otherId === benchId) throw refusal(otherId === benchId ? 'Choose another bench to compare with.' : 'There is no such bench to compare with.')
  const rows = [first, second] as const
  const [a, b] = [await comparedOf(studio, first), await comparedOf(studio, second)]
  const combinations = await Promise.all(rows.map(row => combinationInWords(row)))
  for (const [field, [part]] of Object.entries(shelf)) {
    const ids = rows.map(row => row[field as keyof typeof shelf])
    // Two papers may bear one name.
    if (ids[0] !== ids[1] && combinations[0]![part] === combinations[1]![part]) combinations[1]![part] += ' (another entry)'
  }
  const { differences, warnings } = compareBenches({ name: a.name, response: a.response, combination: combinations[0]! }, { name: b.name, response: b.response, combination: combinations[1]! })
  return { benches: [a, b], differences, warnings }
}

const refusal = (message: string) => new ComputeError('invalid_input', message, [{ path: 'with', message }])

async function comparedOf(studio: StudioAccess, bench: BenchRow): Promise<Compared> {
  const rows = await db().select({ id: curves.id, version: curves.version, state: curves.state, response: curves.response }).from(curves)
    .where(and(eq(curves.studioId, studio.id), eq(curves.benchId, bench.id))).orderBy(desc(curves.version)).limit(50)
  const curve = rows.find(row => row.state === 'in-use') ?? rows[0]
  if (!curve) throw new ComputeError('no_curve', `${bench.name} has no curve yet, so there is nothing to compare. Read a wedge and fit one first.`)
  const [newest] = await newestPrints(db(), studio.id, bench.id, 1)
  const evenness = newest ? await evennessOfReading(db(), newest.reading, newest.wedge) : null
  return {
    benchId: bench.id, name: bench.name, curveId: curve.id, version: curve.version, response: curve.response, ...benchFigures(curve.response),
    evenness: evenness && { texture: evenness.texture, mottle: evenness.mottle, gradient: evenness.gradient },
  }
}

const shelf = { paperId: ['paper', papers], sensitizerId: ['sensitizer', sensitizers], filmId: ['film', films], inkjetId: ['inkjet', inkjets], lampId: ['lamp', lamps] } as const

/** A bench's combination part by part, in words that a person reads. */
async function combinationInWords(bench: BenchRow): Promise<Record<string, string>> {
  const words: Record<string, string> = { 'process': bench.process, 'ink': bench.ink.color, 'reading channel': bench.readingChannel, 'mirrored': bench.mirror ? 'yes' : 'no' }
  for (const [field, [part, drawer]] of Object.entries(shelf)) {
    const id = bench[field as keyof typeof shelf]
    if (!id) continue
    const [item] = await db().select({ name: drawer.name }).from(drawer).where(and(eq(drawer.studioId, bench.studioId), eq(drawer.id, id)))
    words[part] = item?.name ?? 'unknown'
  }
  for (const [group, settings] of [['recipe', bench.recipe], ['path', bench.path]] as const)
    for (const [part, value] of Object.entries(settings)) if (value !== '' && value !== undefined) words[`${group}: ${inWords(part)}`] = String(value)
  return words
}

const inWords = (name: string): string => name.replace(/[A-Z]/g, letter => ` ${letter.toLowerCase()}`)
