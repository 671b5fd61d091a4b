import type { RouteCase } from './route-case'

const walk = 'studios/[studio]/benches/[bench]/walk'

export const walkCases: RouteCase[] = [
  { file: `${walk}/index.get.ts`, row: 'walk', good: async ({ newBench }) => ({ params: { bench: await newBench() } }) },
  {
    file: `${walk}/[step].patch.ts`, row: 'changeWalkStep', good: async ({ newBench }) => ({ params: { bench: await newBench(), step: 'ink-load' }, json: { revision: 0, state: 'done', clockSeconds: 1800 } }),
    bad: [
      { why: 'an old revision', call: () => ({ json: { revision: 3, state: 'done' }, status: 409, code: 'stale_revision' }) },
      { why: 'a state that is none', call: () => ({ json: { revision: 0, state: 'nearly' }, status: 422, code: 'invalid_input' }) },
      { why: 'a clock that runs for weeks', call: () => ({ json: { revision: 0, clockSeconds: 8 * 86_400 }, status: 422, code: 'invalid_input' }) },
    ],
  },
]
