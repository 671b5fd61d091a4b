import type { WalkStep } from '#shared/schemas/calibration'
import { wedgeBody } from '#shared/schemas/wedges'
import { db } from '../../db/client'
import type { StudioAccess } from '../../services/access'
import { createBaseExposure } from '../../services/base-exposures'
import { createBench } from '../../services/benches'
import { createCurve, useCurve } from '../../services/curves'
import { createReading } from '../../services/readings'
import { changeWalkStep, walkOf } from '../../services/walk'
import { starterBench } from '../../services/starter-benches'
import { createWedgePrint } from '../../services/wedge-prints'
import { createWedge } from '../../services/wedges'
import { daysAgo } from './days'
import type { DemoShelf } from './shelf'
import values from './values.json'

type Values = { level: number, value: number }[]
const path = { fileKind: 'tiff', bitDepth: 16, sentBy: 'The lab computer’s print program', pixelsPerInch: 360, mediaType: 'Backlit film', quality: 'Finest, one direction', colourAdjustment: 'off', filmSide: 'The milky, slightly sticky side' } as const
const readByInstrument = 'Patch by patch with the spot instrument, typed in.'
const sheet = { widthMm: 210, heightMm: 297 }

const read = async (studio: StudioAccess, benchId: string, list: Values) => (await createReading(studio, benchId, { body: { unit: 'lightness', zero: 'absolute', values: list } })).item.id

async function say(studio: StudioAccess, benchId: string, step: WalkStep, state: 'done' | 'skipped', notes: string): Promise<void> {
  const revision = (await walkOf(studio, benchId)).steps.find(one => one.step === step)!.revision
  await changeWalkStep(studio, benchId, step, { revision, state, notes })
}

/** Benches in three states. `withFirstCurve` is called while the cyanotype's first curve is in use. */
export async function fillBenches(studio: StudioAccess, shelf: DemoShelf, withFirstCurve: (benchId: string) => Promise<void>) {
  const cyanotype = await calibratedBench(studio, shelf, withFirstCurve)
  const vanDyke = await benchWithDraft(studio, shelf)
  const kallitype = await benchOnItsWalk(studio, shelf)
  await db().transaction(tx => starterBench(tx, studio, 'salt'))
  return { cyanotype, vanDyke, kallitype }
}
export type DemoBenches = Awaited<ReturnType<typeof fillBenches>>

async function calibratedBench(studio: StudioAccess, shelf: DemoShelf, withFirstCurve: (benchId: string) => Promise<void>): Promise<string> {
  const { id } = (await createBench(studio, {
    name: 'Cyanotype, river cotton', process: 'cyanotype', paperId: shelf.riverPaper, sensitizerId: shelf.cyanotype, filmId: shelf.film, inkjetId: shelf.inkjet, lampId: shelf.lamp, path, ink: { color: '#1a1a1a' },
    baseExposure: { value: 480, unit: 's' },
    recipe: { coats: 2, coatedWith: 'brush', drying: 'An hour in the dark, then ten minutes of cool air', contact: 'Sprung frame, plate glass', developer: 'Water', developerTemperatureCelsius: 18, clearing: 'Ten minutes of running water', toner: 'None' },
  })).item
  await say(studio, id, 'path', 'done', 'The film path of the long inkjet.')
  await say(studio, id, 'ink-load', 'done', 'Dry after twenty minutes.')
  await say(studio, id, 'ink-trial', 'skipped', 'Black alone blocks enough.')
  const [firstStrip, secondStrip] = values.cyanotype.strips
  await createBaseExposure(studio, id, { values: firstStrip })
  const wedge = (await createWedge(studio, id, wedgeBody.parse({ page: sheet }))).item.id
  await createWedgePrint(studio, wedge, { exposure: { value: 400, unit: 's' }, exposedAt: daysAgo(41), driedSince: daysAgo(41), notes: 'Brush streaks at the left edge.' })
  const rough = await read(studio, id, values.cyanotype.rough)
  const first = (await createCurve(studio, id, { readingIds: [rough], notes: 'From one streaky print. Good enough to begin with.' })).item.id
  await useCurve(studio, first)
  await withFirstCurve(id)
  await createBaseExposure(studio, id, { values: secondStrip })
  const readings: string[] = []
  for (const [i, list] of values.cyanotype.careful.entries()) {
    await createWedgePrint(studio, wedge, { exposure: { value: 470, unit: 's' }, exposedAt: daysAgo(12 - i), driedSince: daysAgo(12 - i), notes: i === 0 ? 'New brush, coated across and along.' : 'The same again a day later, to see how far two prints lie apart.' })
    readings.push(await read(studio, id, list))
  }
  await say(studio, id, 'read', 'done', readByInstrument)
  await useCurve(studio, (await createCurve(studio, id, { readingIds: readings, notes: 'Two careful prints, a day apart. Replaces the streaky one.' })).item.id)
  return id
}

async function benchWithDraft(studio: StudioAccess, shelf: DemoShelf): Promise<string> {
  const { id } = (await createBench(studio, {
    name: 'Van Dyke, loft vellum', process: 'van-dyke', paperId: shelf.buffPaper, sensitizerId: shelf.vanDyke, filmId: shelf.film, inkjetId: shelf.inkjet, lampId: shelf.lamp, path, ink: { color: '#1a1a1a' },
    recipe: { coats: 1, coatedWith: 'rod', drying: 'Half an hour in the dark', contact: 'Sprung frame, plate glass', developer: 'Water, a little citric acid in the first tray', developerTemperatureCelsius: 20, clearing: 'Fixer 1 + 20, two minutes, then wash' },
  })).item
  await createBaseExposure(studio, id, { values: values.vanDyke.strip })
  const wedge = (await createWedge(studio, id, wedgeBody.parse({ page: sheet, kind: 'numbered', steps: 31 }))).item.id
  await createWedgePrint(studio, wedge, { exposure: { value: 235, unit: 's' }, exposedAt: daysAgo(3), driedSince: daysAgo(3), notes: 'Read with the spot instrument after a night of drying.' })
  for (const step of ['path', 'ink-load', 'ink-trial'] as const) await say(studio, id, step, step === 'ink-trial' ? 'skipped' : 'done', 'As on the cyanotype bench.')
  await say(studio, id, 'read', 'done', readByInstrument)
  await createCurve(studio, id, { readingIds: [await read(studio, id, values.vanDyke.wedge)], notes: 'Draft. A second print first, then we put it in use.' })
  return id
}

/** Path, ink load and base exposure are done; the wedge is printed and hangs to dry. */
async function benchOnItsWalk(studio: StudioAccess, shelf: DemoShelf): Promise<string> {
  const { id } = (await createBench(studio, {
    name: 'Kallitype, river cotton', process: 'kallitype', paperId: shelf.riverPaper, sensitizerId: shelf.kallitype, filmId: shelf.film, inkjetId: shelf.inkjet, lampId: shelf.lamp, path, ink: { color: '#20160c' },
    recipe: { coats: 1, coatedWith: 'rod', drying: 'Three quarters of an hour, fan off', contact: 'Sprung frame, plate glass', developer: 'Sodium citrate, 20 %', developerTemperatureCelsius: 22, clearing: 'Citric acid, 3 %, twice' },
  })).item
  await say(studio, id, 'path', 'done', 'Same path as the cyanotype bench.')
  await say(studio, id, 'ink-load', 'done', 'Full ink is dry to the touch after twenty minutes, no pooling.')
  await createBaseExposure(studio, id, { values: values.kallitype.strip })
  await say(studio, id, 'ink-trial', 'skipped', 'The warm black of last year still blocks enough.')
  const wedge = (await createWedge(studio, id, wedgeBody.parse({ page: sheet }))).item.id
  await createWedgePrint(studio, wedge, { exposure: { value: 150, unit: 's' }, exposedAt: daysAgo(0.2), driedSince: daysAgo(0.1), notes: 'Hangs on line 2.' })
  return id
}
