import { describe, expect, it } from 'vitest'
import { labelComponents } from '#shared/calibration/reading/components'
import { findMarkers } from '#shared/calibration/reading/find-markers'
import type { FindingPlane } from '#shared/calibration/reading/finding-plane'
import { findingPlane, invertedPlane } from '#shared/calibration/reading/finding-plane'
import { grey8 } from '#shared/calibration/reading/picture'
import { seededRandom } from '#shared/calibration/random'
import { isInkModule, markerCodes } from '#shared/calibration/wedge/marker-codes'

/** Every marker, upright, 5 pixels a module, on a dark ground, with one way to lie applied to the whole plane. */
function sheet(k: number): FindingPlane {
  const [module, pitch, columns] = [5, 50, 5]
  const size = pitch * columns
  const values = new Uint8Array(size * size).fill(40)
  markerCodes.forEach((code, id) => {
    for (let y = 0; y < 6 * module; y++) {
      for (let x = 0; x < 6 * module; x++) {
        const light = isInkModule(code, Math.floor(y / module), Math.floor(x / module))
        let [u, v] = [id % columns * pitch + 10 + x, Math.floor(id / columns) * pitch + 10 + y]
        if (k & 4) u = size - 1 - u
        for (let turn = 0; turn < (k & 3); turn++) [u, v] = [size - 1 - v, u]
        values[v * size + u] = light ? 220 : 40
      }
    }
  })
  return { width: size, height: size, factor: 1, values }
}

describe.each([0, 1, 2, 3, 4, 5, 6, 7])('markers lying in way %d', (k) => {
  it('are all recognised, each once, with their mirroring and their corners in the print’s order', () => {
    const seen = findMarkers(sheet(k), markerCodes.length)
    expect(seen.map(m => m.id).sort((a, b) => a - b)).toEqual(markerCodes.map((_, id) => id))
    const size = 250
    for (const { id, corners, mirrored } of seen) {
      expect(mirrored).toBe(k >= 4)
      let [x, y] = [id % 5 * 50 + 10, Math.floor(id / 5) * 50 + 10]
      if (k & 4) x = size - x
      for (let turn = 0; turn < (k & 3); turn++) [x, y] = [size - y, x]
      expect(Math.hypot(corners[0][0] - x, corners[0][1] - y), `marker ${id}`).toBeLessThan(1)
    }
  })
})

describe('finding markers', () => {
  it('finds none with light and dark exchanged, and all once the plane is inverted', () => {
    const inverted = invertedPlane(sheet(0))
    expect(findMarkers(inverted, 20)).toEqual([])
    expect(findMarkers(invertedPlane(inverted), 20)).toHaveLength(20)
  })

  it('finds none in ten fields of random squares', () => {
    const random = seededRandom(3)
    for (let n = 0; n < 10; n++) {
      const cells = Array.from({ length: 400 }, () => random.below(256))
      const values = Uint8Array.from({ length: 400 * 400 }, (_, i) => cells[Math.floor(i / 400 / 20) * 20 + Math.floor(i % 400 / 20)]!)
      expect(findMarkers({ width: 400, height: 400, factor: 1, values }, 20)).toEqual([])
    }
  })
})

describe('the finding plane', () => {
  it('holds the mean of each box’s least channel', () => {
    const codes = new Uint8Array(8 * 8 * 3).map((_, i) => i % 3 === 1 ? 200 : i % 3 === 0 ? 90 : 100)
    codes[0] = 10
    const plane = findingPlane({ width: 8, height: 8, channels: 3, codes, colour: grey8 }, 4)
    expect([plane.width, plane.height, plane.factor]).toEqual([4, 4, 2])
    expect([plane.values[0], plane.values[1]]).toEqual([(10 + 3 * 90) / 4, 90])
  })

  it('says the same of 16-bit codes', () => {
    const codes = Uint16Array.from({ length: 36 }, (_, i) => i * 1800)
    const eight = Uint8Array.from(codes, code => Math.round(code / 257))
    const plane = (values: Uint8Array | Uint16Array, levels: number): number[] => Array.from(findingPlane(
      { width: 6, height: 6, channels: 1, codes: values, colour: { linear: new Float32Array(levels), xyz: grey8.xyz } }, 3).values)
    plane(codes, 65536).forEach((value, i) => expect(Math.abs(value - plane(eight, 256)[i]!)).toBeLessThanOrEqual(1))
  })
})

describe('components', () => {
  it('joins a U from both its arms and keeps a diagonal neighbour apart', () => {
    const mask = Uint8Array.from([
      1, 0, 1, 0,
      1, 0, 1, 0,
      1, 1, 1, 0,
      0, 0, 0, 1,
    ])
    const { components } = labelComponents(mask, 4, 4)
    expect(components.map(c => [c.x0, c.y0, c.x1, c.y1, c.area])).toEqual([[0, 0, 2, 2, 7], [3, 3, 3, 3, 1]])
  })
})
