import { randomUUID } from 'node:crypto'
import type { RouteCase } from './route-case'

const benches = 'studios/[studio]/benches'

export const benchCases: RouteCase[] = [
  { file: `${benches}/index.get.ts`, row: 'listBenches', good: () => ({}) },
  {
    file: `${benches}/index.post.ts`, row: 'createBench', good: () => ({ json: { name: 'Window bench', process: 'salt', baseExposure: { value: 480, unit: 's' } }, status: 201 }),
    bad: [
      { why: 'a paper of nowhere', call: () => ({ json: { name: 'Window bench', process: 'salt', paperId: randomUUID() }, status: 422, code: 'invalid_input' }) },
      { why: 'an exposure below nothing', call: () => ({ json: { name: 'Window bench', process: 'salt', baseExposure: { value: -1, unit: 's' } }, status: 422, code: 'invalid_input' }) },
      { why: 'an ink colour that is none', call: () => ({ json: { name: 'Window bench', process: 'salt', ink: { color: 'black' } }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${benches}/[bench]/index.get.ts`, row: 'bench', good: async ({ newBench }) => ({ params: { bench: await newBench() } }) },
  {
    file: `${benches}/[bench]/index.patch.ts`, row: 'changeBench', good: async ({ newBench }) => ({ params: { bench: await newBench() }, json: { name: 'North window', revision: 1 } }),
    bad: [{ why: 'an old revision', call: () => ({ json: { name: 'North window', revision: 9 }, status: 409, code: 'stale_revision' }) }],
  },
  { file: `${benches}/[bench]/copy.post.ts`, row: 'copyBench', good: async ({ newBench }) => ({ params: { bench: await newBench() }, json: { process: 'van-dyke' }, status: 201 }) },
  {
    file: `${benches}/[bench]/archive.post.ts`, row: 'archiveBench', good: async ({ newBench }) => ({ params: { bench: await newBench() }, json: { revision: 1 } }),
    bad: [{ why: 'no revision', call: () => ({ json: {}, status: 422, code: 'invalid_input' }) }],
  },
  { file: `${benches}/[bench]/base-exposures.get.ts`, row: 'listBaseExposures', good: async ({ newBench }) => ({ params: { bench: await newBench() } }) },
  {
    file: 'studios/[studio]/starter-benches.post.ts', row: 'createStarterBench',
    good: async ({ owner, make }) => {
      await make('starter-benches', { process: 'kallitype' })
      return { params: { studio: owner.ids.studio }, json: { process: 'kallitype' }, status: 200 }
    },
    bad: [{ why: 'a process without a starter curve', call: () => ({ json: { process: 'carbon' }, status: 422, code: 'no_starter_curve' }) }],
  },
]
