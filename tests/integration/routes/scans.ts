import { newWedge, printOfChart, scanFile, scanForm, scanOf } from '../../support/wedge-scans'
import type { RouteCase } from './route-case'
import type { World } from './world'

const reading = 'studios/[studio]/readings/[reading]'

/** A wedge of the owner's, and a scan of its print as a file. */
async function scannedWedge({ owner }: World) {
  const { wedgeId, chart } = await newWedge(owner)
  return { wedgeId, bytes: await scanFile(scanOf(printOfChart(chart), chart, { pixelsPerInch: 150 })) }
}

async function newScan(world: World): Promise<{ params: Record<string, string> }> {
  const { wedgeId, bytes } = await scannedWedge(world)
  const answer = await world.owner.agent.call('POST', `${world.owner.root}/wedges/${wedgeId}/readings`, { body: scanForm(bytes) })
  if (answer.status !== 201) throw new Error(`Handing a scan in answered ${answer.status}: ${answer.text}`)
  return { params: { reading: answer.body.id as string } }
}

/** Simulating and reading a scan takes a while: made once for a world. */
function once<T>(make: (world: World) => Promise<T>): (world: World) => Promise<T> {
  const made = new WeakMap<World, Promise<T>>()
  return (world) => {
    const before = made.get(world) ?? make(world)
    made.set(world, before)
    return before
  }
}
const [aScannedWedge, aScan, aScanToRemove] = [once(scannedWedge), once(newScan), once(newScan)]

const garbage = Buffer.from('GIF89a, or so it says')
export const scanCases: RouteCase[] = [
  {
    file: 'studios/[studio]/wedges/[wedge]/readings/index.post.ts', row: 'createWedgeReading',
    good: async (world) => {
      const { wedgeId, bytes } = await aScannedWedge(world)
      return { params: { wedge: wedgeId }, body: scanForm(bytes, { printNumber: '3', quality: 'scan' }), status: 201 }
    },
    bad: [
      { why: 'what is no picture', call: () => ({ body: scanForm(garbage), status: 415, code: 'not_an_image' }) },
      { why: 'an empty file', call: () => ({ body: scanForm(Buffer.alloc(0)), status: 415, code: 'not_an_image' }) },
      { why: 'three corners', call: () => ({ body: scanForm(garbage, { corners: '[[1,2],[3,4],[5,6]]' }), status: 422, code: 'invalid_input' }) },
      { why: 'corners that are no JSON', call: () => ({ body: scanForm(garbage, { corners: 'left' }), status: 422, code: 'invalid_input' }) },
      { why: 'a print number of nought', call: () => ({ body: scanForm(garbage, { printNumber: '0' }), status: 422, code: 'invalid_input' }) },
      { why: 'a scanner of nowhere', call: () => ({ body: scanForm(garbage, { scannerId: '0197f3c0-0000-7000-8000-000000000000' }), status: 422, code: 'invalid_input' }) },
      { why: 'an unknown field', call: () => ({ body: scanForm(garbage, { colour: 'blue' }), status: 422, code: 'invalid_input' }) },
      { why: 'JSON', call: () => ({ body: undefined, json: {}, status: 415, code: 'unsupported_media' }) },
      { why: 'an upload that breaks off', call: () => ({ body: '--b\r\ncontent-disposition: form-data; name="scan"; filename="a.jpg"\r\n\r\nab', headers: { 'content-type': 'multipart/form-data; boundary=b' }, status: 400, code: 'malformed_body' }) },
    ],
  },
  {
    file: `${reading}/read-again.post.ts`, row: 'readAgain', good: async world => ({ ...await aScan(world), json: { printNumber: 2 } }),
    bad: [
      { why: 'a wedge of nowhere', call: () => ({ json: { wedgeId: '0197f3c0-0000-7000-8000-000000000000' }, status: 422, code: 'invalid_input' }) },
      { why: 'two corners', call: () => ({ json: { corners: [[1, 2], [3, 4]] }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: `${reading}/picture.get.ts`, row: 'readingPicture', good: async world => ({ ...await aScan(world), query: { width: '120', cells: 'true' } }),
    bad: [{ why: 'a width of nothing', call: () => ({ query: { width: '0' }, status: 422, code: 'invalid_input' }) }],
  },
  { file: `${reading}/file.get.ts`, row: 'readingFile', good: aScan },
  { file: `${reading}/index.delete.ts`, row: 'deleteReading', good: async world => ({ ...await aScanToRemove(world), status: 204 }) },
]
