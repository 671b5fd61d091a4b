import type { RouteCase } from './route-case'

const shelf = 'studios/[studio]/[shelf]'

export const shelfCases: RouteCase[] = [
  {
    file: 'studios/[studio]/shelf/index.get.ts', row: 'searchShelf', good: () => ({ query: { words: 'cotton 300' } }),
    bad: [{ why: 'words without end', call: () => ({ query: { words: 'x'.repeat(201) }, status: 422, code: 'invalid_input' }) }],
  },
  {
    file: `${shelf}/index.get.ts`, row: 'listShelf', good: () => ({ params: { shelf: 'papers' } }),
    bad: [
      { why: 'a drawer that is none', call: () => ({ params: { shelf: 'spoons' }, status: 404, code: 'not_found' }) },
      { why: 'a page of nothing', call: () => ({ query: { limit: '0' }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: `${shelf}/index.post.ts`, row: 'createShelfItem', good: () => ({ params: { shelf: 'lamps' }, json: { name: 'Eight tubes', facts: { source: 'tubes', peakNanometres: 365, distanceMm: 110 } }, status: 201 }),
    bad: [
      { why: 'a fact of another drawer', call: () => ({ params: { shelf: 'lamps' }, json: { name: 'Eight tubes', facts: { surface: 'rough' } }, status: 422, code: 'invalid_input' }) },
      { why: 'a fact out of its bounds', call: () => ({ params: { shelf: 'lamps' }, json: { name: 'Eight tubes', facts: { peakNanometres: 3650 } }, status: 422, code: 'invalid_input' }) },
      { why: 'an id that is no version 7', call: () => ({ json: { id: 'd7f5c1f2-8f5e-4b5e-9a3c-0a5b4c3d2e1f', name: 'Eight tubes' }, status: 422, code: 'invalid_input' }) },
      { why: 'a null character', call: () => ({ json: { name: 'Eight\u0000tubes' }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${shelf}/[item]/index.get.ts`, row: 'shelfItem', good: async ({ newPaper }) => ({ params: { shelf: 'papers', item: await newPaper() } }) },
  {
    file: `${shelf}/[item]/index.patch.ts`, row: 'changeShelfItem', good: async ({ newPaper }) => ({ params: { shelf: 'papers', item: await newPaper() }, json: { notes: 'Sized twice', revision: 1 } }),
    bad: [{ why: 'an old revision', call: () => ({ json: { notes: 'Sized', revision: 7 }, status: 409, code: 'stale_revision' }) }],
  },
  {
    file: `${shelf}/[item]/archive.post.ts`, row: 'archiveShelfItem', good: async ({ newPaper }) => ({ params: { shelf: 'papers', item: await newPaper() }, json: { revision: 1 } }),
    bad: [{ why: 'another drawer than its own', call: () => ({ params: { shelf: 'films' }, status: 404, code: 'not_found' }) }],
  },
  {
    file: `${shelf}/[item]/restore.post.ts`, row: 'restoreShelfItem', good: async ({ newPaper }) => ({ params: { shelf: 'papers', item: await newPaper() }, json: { revision: 1 } }),
    bad: [{ why: 'an old revision', call: () => ({ json: { revision: 3 }, status: 409, code: 'stale_revision' }) }],
  },
]
