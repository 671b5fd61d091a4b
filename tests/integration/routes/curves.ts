import { randomUUID } from 'node:crypto'
import type { RouteCase } from './route-case'
import { wedgeValues } from './world'

const bench = 'studios/[studio]/benches/[bench]'
const curve = 'studios/[studio]/curves/[curve]'

export const curveCases: RouteCase[] = [
  { file: `${bench}/readings/index.get.ts`, row: 'listReadings', good: async ({ newBench }) => ({ params: { bench: await newBench() } }) },
  {
    file: `${bench}/readings/index.post.ts`, row: 'createReading', good: async ({ newBench }) => ({ params: { bench: await newBench() }, json: { unit: 'lightness', values: wedgeValues }, status: 201 }),
    bad: [
      { why: 'four levels', call: () => ({ json: { unit: 'lightness', values: wedgeValues.slice(0, 20).filter((_, i) => i % 5 === 0) }, status: 422, code: 'too_few_levels' }) },
      { why: 'a range under 10 L*', call: () => ({ json: { unit: 'lightness', values: wedgeValues.map(v => ({ ...v, value: 50 + 9 * v.level })) }, status: 422, code: 'range_too_small' }) },
      { why: 'levels that count the other way', call: () => ({ json: { unit: 'lightness', values: wedgeValues.map(v => ({ ...v, level: 1 - v.level })) }, status: 422, code: 'levels_unrelated' }) },
      { why: 'a CSV without columns', call: () => ({ json: undefined, body: 'spoon,fork\n1,2\n', headers: { 'content-type': 'text/csv' }, status: 422, code: 'unparsable' }) },
      { why: 'a spreadsheet', call: () => ({ json: undefined, body: 'x', headers: { 'content-type': 'application/vnd.ms-excel' }, status: 415, code: 'unsupported_media' }) },
      { why: 'not a number', call: () => ({ json: undefined, body: '{"unit":"lightness","values":[{"level":NaN,"value":1}]}', headers: { 'content-type': 'application/json' }, status: 400, code: 'malformed_body' }) },
      { why: 'more than 2 MB of JSON', call: () => ({ json: { unit: 'lightness', values: [], x: 'x'.repeat(2_100_000) }, status: 413, code: 'body_too_large' }) },
    ],
  },
  {
    file: 'studios/[studio]/readings/[reading]/index.get.ts', row: 'reading',
    good: async world => ({ params: { reading: await world.newReading(await world.newBench()) } }),
  },
  { file: `${bench}/curves/index.get.ts`, row: 'listCurves', good: async ({ newBench }) => ({ params: { bench: await newBench() } }) },
  {
    file: `${bench}/curves/index.post.ts`, row: 'createCurve',
    good: async (world) => {
      const id = await world.newBench()
      return { params: { bench: id }, json: { readingIds: [await world.newReading(id)], aim: 'keep-middle-tones' }, status: 201 }
    },
    bad: [
      { why: 'a reading of nowhere', call: () => ({ json: { readingIds: [randomUUID()] }, status: 422, code: 'invalid_input' }) },
      { why: 'no readings', call: () => ({ json: { readingIds: [] }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${curve}/index.get.ts`, row: 'curve', good: async world => ({ params: { curve: (await world.newCurve()).curve } }) },
  {
    file: `${curve}/index.patch.ts`, row: 'changeCurve', good: async world => ({ params: { curve: (await world.newCurve()).curve }, json: { notes: 'After the new batch.', revision: 1 } }),
    bad: [{ why: 'an old revision', call: () => ({ json: { notes: 'Mine', revision: 7 }, status: 409, code: 'stale_revision' }) }],
  },
  { file: `${curve}/use.post.ts`, row: 'useCurve', good: async world => ({ params: { curve: (await world.newCurve()).curve } }) },
  { file: `${curve}/retire.post.ts`, row: 'retireCurve', good: async world => ({ params: { curve: (await world.newCurve()).curve } }) },
  {
    file: `${curve}/table.get.ts`, row: 'curveTable', good: async world => ({ params: { curve: (await world.newCurve()).curve }, query: { format: 'cgats' } }),
    bad: [{ why: 'another format', call: () => ({ query: { format: 'xls' }, status: 422, code: 'invalid_input' }) }],
  },
]
