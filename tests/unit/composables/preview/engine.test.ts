import { describe, expect, it } from 'vitest'
import { codeRange, PreviewEngine, type PreviewOrder } from '../../../../composables/preview/engine'
import { starterResponse } from '../../../../shared/calibration/starter'

const order = (patch: Partial<PreviewOrder> = {}): PreviewOrder => ({
  adjustments: { mix: { red: 1, green: 1, blue: 1 }, blackPoint: 0, whitePoint: 1, midtone: 0, contrast: 0 },
  aim: 'even-lightness', response: starterResponse('cyanotype').response, process: 'cyanotype', colourPath: null, mirror: true, dim: false, ...patch,
})
/** A neutral ramp from black to white: the working space's codes are L*-like, equal channels are neutral. */
function ramp(width: number, height = 2) {
  const channels = new Uint16Array(3 * width * height)
  for (let pixel = 0; pixel < width * height; pixel++) channels.fill(Math.round((pixel % width) / (width - 1) * 65535), 3 * pixel, 3 * pixel + 3)
  return channels
}
function engineWith(patch: Partial<PreviewOrder> = {}) {
  const engine = new PreviewEngine()
  engine.setSource(ramp(101), 101, 2)
  engine.setOrder(order(patch))
  return engine
}
const drawn = (engine: PreviewEngine, state: 'photo' | 'film' | 'print') => {
  const pixels = new Uint32Array(engine.width * engine.height)
  engine.draw(state, pixels)
  return pixels
}
const red = (pixel: number) => pixel & 255
const blue = (pixel: number) => (pixel >> 16) & 255

describe('PreviewEngine', () => {
  it('shows the print in the bench’s own colours where there are any, and in amber in the dim room all the same', () => {
    const colourPath: [number, number, number][] = [[94, 0, 12], [20, 12, 8]]
    const own = drawn(engineWith({ colourPath }), 'print')
    expect(own).not.toEqual(drawn(engineWith(), 'print'))
    expect(red(own[50]!)).toBeGreaterThan(blue(own[50]!))
    expect(drawn(engineWith({ colourPath, dim: true }), 'print')).toEqual(drawn(engineWith({ dim: true }), 'print'))
  })

  it('shows the photo from black to white and the mirrored film the same way round, since light tones take ink', () => {
    const engine = engineWith()
    const [photo, film] = [drawn(engine, 'photo'), drawn(engine, 'film')]
    expect([red(photo[0]!), red(photo[100]!)]).toEqual([0, 255])
    expect(red(film[0]!)).toBeLessThan(red(film[100]!))
  })

  it('draws the film unmirrored where the process wants it', () => {
    const [mirrored, plain] = [drawn(engineWith(), 'film'), drawn(engineWith({ mirror: false }), 'film')]
    expect([...plain.subarray(0, 101)]).toEqual([...mirrored.subarray(0, 101)].reverse())
  })

  it('has no blue in any pixel of the dim room', () => {
    const engine = engineWith({ dim: true })
    for (const state of ['photo', 'film', 'print'] as const) expect(Math.max(...drawn(engine, state).map(blue))).toBe(0)
  })

  it('reads the same spot in all three states', () => {
    const engine = engineWith()
    const { response } = order()
    const dark = engine.read(0, 0)
    expect(dark).toMatchObject({ lightness: 0, level: 0, printLightness: response[0] })
    // D = −log10 Y at the starter's deepest L* 25: Y = ((25 + 16) / 116)^3 = .04415, D = 1.355 (derived)
    expect(dark.printDensity).toBeCloseTo(1.355, 3)
    expect(engine.read(0.999, 0.999)).toMatchObject({ level: 1, printLightness: response.at(-1) })
  })

  it('mixes again only when the mix changes, and to the same tones', () => {
    const engine = engineWith()
    const before = engine.read(0.5, 0)
    engine.setOrder(order({ adjustments: { ...order().adjustments, mix: { red: 1, green: 0, blue: 0 } } }))
    expect(engine.read(0.5, 0).lightness).toBeCloseTo(before.lightness, 1)
  })
})

describe('codeRange', () => {
  it('leaves out one pixel in a thousand at each end', () => {
    const histogram = new Uint32Array(65536)
    histogram[10] = 1
    histogram[1000] = 500
    histogram[50000] = 500
    histogram[65000] = 1
    expect(codeRange(histogram)).toEqual([1000, 50000])
  })

  it('is everything where there is no picture', () => {
    expect(codeRange(new Uint32Array(65536))).toEqual([0, 65535])
  })
})
