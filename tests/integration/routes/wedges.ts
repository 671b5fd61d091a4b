import { randomUUID } from 'node:crypto'
import type { RouteCase } from './route-case'
import type { World } from './world'

const ofBench = 'studios/[studio]/benches/[bench]/wedges'
const wedge = 'studios/[studio]/wedges/[wedge]'
const page = { widthMm: 210, heightMm: 297 }
const ofNew = async (world: World) => ({ params: { wedge: await world.newWedge() } })

export const wedgeCases: RouteCase[] = [
  { file: `${ofBench}/index.get.ts`, row: 'listWedges', good: async ({ newBench }) => ({ params: { bench: await newBench() }, query: { kind: 'scattered' } }) },
  {
    file: `${ofBench}/index.post.ts`, row: 'createWedge', good: async ({ newBench }) => ({ params: { bench: await newBench() }, json: { page, kind: 'numbered' }, status: 201 }),
    bad: [
      { why: 'a sheet that no wedge fits', call: () => ({ json: { page: { widthMm: 100, heightMm: 150 } }, status: 422, code: 'invalid_input' }) },
      { why: 'a curve of nowhere', call: () => ({ json: { page, throughCurveId: randomUUID() }, status: 422, code: 'invalid_input' }) },
      { why: 'an ink trial without mixes', call: () => ({ json: { page, kind: 'ink-trial' }, status: 422, code: 'invalid_input' }) },
      { why: 'steps for a wedge that has none', call: () => ({ json: { page, steps: 21 }, status: 422, code: 'invalid_input' }) },
      { why: 'a film of too many pixels', call: () => ({ json: { page: { widthMm: 600, heightMm: 800 }, pixelsPerInch: 1440 }, status: 422, code: 'film_too_large' }) },
    ],
  },
  { file: `${wedge}/index.get.ts`, row: 'wedge', good: ofNew },
  { file: `${wedge}/index.delete.ts`, row: 'archiveWedge', good: async world => ({ ...await ofNew(world), status: 204 }) },
  {
    file: `${wedge}/file.get.ts`, row: 'wedgeFile', good: async world => ({ ...await ofNew(world), query: { format: 'png' }, status: 202 }),
    bad: [{ why: 'another format', call: () => ({ query: { format: 'jpeg' }, status: 422, code: 'invalid_input' }) }],
  },
  {
    file: `${wedge}/preview.get.ts`, row: 'wedgePreview', good: async world => ({ ...await ofNew(world), query: { width: '64' } }),
    bad: [{ why: 'a width of nothing', call: () => ({ query: { width: '0' }, status: 422, code: 'invalid_input' }) }],
  },
  { file: `${wedge}/prints/index.get.ts`, row: 'listWedgePrints', good: ofNew },
  {
    file: `${wedge}/prints/index.post.ts`, row: 'createWedgePrint', good: async world => ({ ...await ofNew(world), json: { number: 3, exposure: { value: 480, unit: 's' } }, status: 201 }),
    bad: [{ why: 'a number of no print', call: () => ({ json: { number: 0 }, status: 422, code: 'invalid_input' }) }],
  },
  {
    file: 'studios/[studio]/wedge-prints/[print].patch.ts', row: 'changeWedgePrint', good: async world => ({ params: { print: await world.newWedgePrint() }, json: { revision: 1, driedSince: '2026-03-02T18:00:00Z' } }),
    bad: [{ why: 'an old revision', call: () => ({ json: { revision: 7, notes: 'Brushed across.' }, status: 409, code: 'stale_revision' }) }],
  },
]
