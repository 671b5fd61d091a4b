import { randomUUID } from 'node:crypto'
import type { RouteCase } from './route-case'
import type { World } from './world'

const bench = 'studios/[studio]/benches/[bench]'
const profiles = 'studios/[studio]/scanner-profiles/[scanner]'

/** Lightness of a print of logistic response: density 0.08 … 1.4, half of it at 60 s. */
export const lightnessAfter = (seconds: number): number => {
  const density = 0.08 + 1.32 / (1 + Math.exp(-5 * Math.log10(seconds / 60)))
  return 116 * Math.cbrt(10 ** -density) - 16
}
/** Twelve half-stop steps. */
export const stripValues = Array.from({ length: 12 }, (_, i) => 10 * 2 ** (i / 2)).map(exposureSeconds => ({ exposureSeconds, lightness: lightnessAfter(exposureSeconds) }))
/** A tablet of 21 steps printed for `seconds` on that paper. */
export const tabletValues = (seconds = 600) => Array.from({ length: 21 }, (_, i) => 0.05 + 0.15 * i).map(density => ({ density, lightness: lightnessAfter(seconds * 10 ** -density) }))
/** What a scanner with lifted darks sees of nine greys. */
export const profilePoints = Array.from({ length: 9 }, (_, i) => 15 + 10 * i).map(measured => ({ measured, scanned: 5 + 0.94 * measured }))

const newScanner = ({ make }: World) => make('scanners', { name: 'Flatbed by the door' })
const newProfile = async (world: World) => {
  const scanner = await newScanner(world)
  return { scanner, profile: await world.make(`scanner-profiles/${scanner}`, { process: 'cyanotype', kind: 'grey-scale', points: profilePoints }) }
}
const newTablet = async ({ newBench, make }: World) => {
  const benchId = await newBench()
  return { bench: benchId, tablet: await make(`benches/${benchId}/tablets`, { values: tabletValues() }) }
}
const newFilmDensities = async (world: World) => {
  const { bench: benchId, curve } = await world.newCurve()
  const tablet = await world.make(`benches/${benchId}/tablets`, { values: tabletValues() })
  return { bench: benchId, tablet, curve, densities: await world.make(`benches/${benchId}/film-densities`, { tabletId: tablet, curveId: curve }) }
}

export const calibrationCases: RouteCase[] = [
  {
    file: `${bench}/base-exposures.post.ts`, row: 'createBaseExposure', good: async ({ newBench }) => ({ params: { bench: await newBench() }, json: { values: stripValues }, status: 201 }),
    bad: [
      { why: 'four exposures', call: () => ({ json: { values: stripValues.slice(0, 4) }, status: 422, code: 'too_few_levels' }) },
      { why: 'a strip of one tone', call: () => ({ json: { values: stripValues.map(v => ({ ...v, lightness: 30 })) }, status: 422, code: 'range_too_small' }) },
      { why: 'a strip that gets lighter', call: () => ({ json: { values: stripValues.map((v, i) => ({ ...v, lightness: stripValues.at(-1 - i)!.lightness })) }, status: 422, code: 'levels_unrelated' }) },
      { why: 'an exposure of nothing', call: () => ({ json: { values: [{ exposureSeconds: 0, lightness: 50 }] }, status: 422, code: 'invalid_input' }) },
      { why: 'neither values nor a reading', call: () => ({ json: {}, status: 422, code: 'invalid_input' }) },
      { why: 'a reading of nowhere', call: () => ({ json: { readingId: randomUUID() }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${bench}/tablets/index.get.ts`, row: 'listTablets', good: async ({ newBench }) => ({ params: { bench: await newBench() } }) },
  {
    file: `${bench}/tablets/index.post.ts`, row: 'createTablet', good: async ({ newBench }) => ({ params: { bench: await newBench() }, json: { values: tabletValues(), exposure: { value: 600, unit: 's' } }, status: 201 }),
    bad: [
      { why: 'four steps', call: () => ({ json: { values: tabletValues().slice(0, 4) }, status: 422, code: 'invalid_input' }) },
      { why: 'steps of one tone', call: () => ({ json: { values: tabletValues().map(v => ({ ...v, lightness: 90 })) }, status: 422, code: 'range_too_small' }) },
      { why: 'a reading of nowhere', call: () => ({ json: { readingId: randomUUID() }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: `${bench}/tablets/[tablet]/film-curve.post.ts`, row: 'filmCurve', good: async (world) => {
      const { densities } = await newFilmDensities(world)
      return { params: await newTablet(world), json: { filmDensitiesId: densities }, status: 201 }
    },
    bad: [{ why: 'film densities of nowhere', call: () => ({ json: { filmDensitiesId: randomUUID() }, status: 422, code: 'invalid_input' }) }],
  },
  { file: `${bench}/film-densities.get.ts`, row: 'listFilmDensities', good: async ({ newBench }) => ({ params: { bench: await newBench() } }) },
  {
    file: `${bench}/film-densities.post.ts`, row: 'createFilmDensities', good: async (world) => {
      const { bench: benchId, curve } = await world.newCurve()
      return { params: { bench: benchId }, json: { curveId: curve, tabletId: await world.make(`benches/${benchId}/tablets`, { values: tabletValues() }) }, status: 201 }
    },
    bad: [{ why: 'a tablet of nowhere', call: () => ({ json: { curveId: randomUUID(), tabletId: randomUUID() }, status: 422, code: 'invalid_input' }) }],
  },
  {
    file: `${bench}/comparison.get.ts`, row: 'compareBenches', good: async world => ({ params: { bench: (await world.newCurve()).bench }, query: { with: (await world.newCurve()).bench } }),
    bad: [{ why: 'a bench of nowhere', call: () => ({ query: { with: randomUUID() }, status: 422, code: 'invalid_input' }) }],
  },
  { file: `${profiles}/index.get.ts`, row: 'listScannerProfiles', good: async world => ({ params: { scanner: await newScanner(world) } }) },
  {
    file: `${profiles}/index.post.ts`, row: 'createScannerProfile', good: async world => ({ params: { scanner: await newScanner(world) }, json: { process: 'cyanotype', kind: 'grey-scale', points: profilePoints }, status: 201 }),
    bad: [
      { why: 'four greys', call: () => ({ json: { process: 'cyanotype', kind: 'grey-scale', points: profilePoints.slice(0, 4) }, status: 422, code: 'too_few_levels' }) },
      { why: 'light and dark exchanged', call: () => ({ json: { process: 'cyanotype', kind: 'grey-scale', points: profilePoints.map(p => ({ ...p, measured: 110 - p.measured })) }, status: 422, code: 'levels_unrelated' }) },
      { why: 'a reading of nowhere', call: () => ({ json: { process: 'cyanotype', kind: 'own-print', readingId: randomUUID(), measured: [] }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${profiles}/[profile].delete.ts`, row: 'archiveScannerProfile', good: async world => ({ params: await newProfile(world), status: 204 }) },
  { file: 'studios/[studio]/readings/[reading]/findings.get.ts', row: 'findings', good: async ({ newBench, newReading }) => ({ params: { reading: await newReading(await newBench()) } }) },
]
