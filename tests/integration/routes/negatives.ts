import { randomUUID } from 'node:crypto'
import type { RouteCase } from './route-case'
import type { World } from './world'

const negatives = 'studios/[studio]/negatives'
const size = { widthMm: 30, heightMm: 20 }
const ofNew = async ({ newNegative }: World) => ({ params: { negative: await newNegative() } })

export const negativeCases: RouteCase[] = [
  { file: `${negatives}/index.get.ts`, row: 'listNegatives', good: () => ({}) },
  {
    file: `${negatives}/index.post.ts`, row: 'createNegative', good: async ({ newPhoto }) => ({ json: { photoId: await newPhoto(), process: 'salt', size }, status: 201 }),
    bad: [
      { why: 'a photo of nobody', call: () => ({ json: { photoId: randomUUID(), process: 'salt', size }, status: 404, code: 'not_found' }) },
      { why: 'a negative size', call: () => ({ json: { photoId: randomUUID(), process: 'salt', size: { widthMm: -30, heightMm: 20 } }, status: 422, code: 'invalid_input' }) },
      { why: 'a bench and a process', call: () => ({ json: { photoId: randomUUID(), benchId: randomUUID(), process: 'salt', size }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${negatives}/[negative]/index.get.ts`, row: 'negative', good: ofNew },
  {
    file: `${negatives}/[negative]/index.patch.ts`, row: 'changeNegative', good: async world => ({ ...await ofNew(world), json: { revision: 1, name: 'Weir, small' } }),
    bad: [
      { why: 'an old revision', call: () => ({ json: { revision: 4, name: 'Weir' }, status: 409, code: 'stale_revision' }) },
      { why: 'a film of too many pixels', call: () => ({ json: { revision: 1, size: { widthMm: 1500, heightMm: 1500 }, pixelsPerInch: 1440 }, status: 422, code: 'film_too_large' }) },
    ],
  },
  { file: `${negatives}/[negative]/index.delete.ts`, row: 'archiveNegative', good: async world => ({ ...await ofNew(world), status: 204 }) },
  { file: `${negatives}/[negative]/file.get.ts`, row: 'negativeFile', good: async world => ({ ...await ofNew(world), query: { format: 'png' }, status: 202 }) },
  { file: `${negatives}/[negative]/renders.post.ts`, row: 'makeRender', good: async world => ({ ...await ofNew(world), json: { format: 'png' }, status: 202 }) },
  {
    file: `${negatives}/[negative]/forecast.get.ts`, row: 'negativeForecast', good: async world => ({ ...await ofNew(world), query: { width: '64' } }),
    bad: [{ why: 'a width of nothing', call: () => ({ query: { width: '0' }, status: 422, code: 'invalid_input' }) }],
  },
  { file: `${negatives}/[negative]/print-card.get.ts`, row: 'negativePrintCard', good: ofNew },
]
