import { describe, expect, it } from 'vitest'
import { evennessOf } from '../../../shared/calibration/evenness'
import { seededRandom } from '../../../shared/calibration/random'
import { toneWeights } from '../../../shared/calibration/tone-weights'
import { layoutWedge } from '../../../shared/calibration/wedge-layout'
import { drawSystem } from '../../support/simulator/system'
import { printWedge } from '../../support/simulator/wedge'
import type { PrintQuality } from '../../support/simulator/print'

const grid = Array.from({ length: 1025 }, (_, i) => i / 1024)
const even: PrintQuality = { gradient: 0, mottle: 0, texture: 0, fallOff: 0 }

/** Evenness of one simulated print against the true response; pixels spread by the coating's weight and a scanner's 0.4 L*. */
function simulated(seed: number, quality: PrintQuality) {
  const random = seededRandom(seed)
  const system = drawSystem(random, { exposureScaleFrom: 1.2, exposureScaleTo: 2.2 })
  const response = grid.map(level => system.lightness(level))
  const print = printWedge(system, layoutWedge({ grid: '24x16', seed }), quality, random)
  const { coating } = toneWeights(response, print.map(p => p.level))
  return evennessOf(print.map((p, i) => ({ ...p, deviation: Math.hypot(0.4, quality.texture * coating[i]!) })), response)
}
const means = (quality: PrintQuality, of: (e: ReturnType<typeof simulated>) => number): number => {
  const values = Array.from({ length: 12 }, (_, seed) => of(simulated(seed, quality)))
  return values.reduce((x, y) => x + y, 0) / values.length
}

describe('evenness of a print', () => {
  it('is next to nothing on an even print', () => {
    const { mottle, gradient, texture, light } = simulated(1, even)
    expect(Math.max(mottle, gradient, texture!, Math.abs(light.right), Math.abs(light.down))).toBeLessThan(0.05)
  })

  it('finds mottle, gradient and texture as they were printed, on the mean of prints', () => {
    expect(means({ ...even, mottle: 1 }, e => e.mottle)).toBeCloseTo(0.95, 0)
    expect(Math.abs(means({ ...even, mottle: 2 }, e => e.mottle) / means({ ...even, mottle: 1 }, e => e.mottle) - 2)).toBeLessThan(0.15)
    expect(Math.abs(means({ ...even, gradient: 2 }, e => e.gradient) - 2)).toBeLessThan(0.3)
    expect(Math.abs(means({ ...even, texture: 3 }, e => e.texture!) - 3)).toBeLessThan(0.2)
  })

  it('lays light that falls off at the light’s door, lighter towards the edges', () => {
    expect(means({ ...even, fallOff: 0.15 }, e => e.light.edges)).toBeGreaterThan(0.5)
    expect(Math.abs(means({ ...even, gradient: 2 }, e => e.light.edges))).toBeLessThan(0.2)
  })

  it('says nothing of texture where no spread was read, and needs patches', () => {
    const random = seededRandom(1)
    const system = drawSystem(random)
    const print = printWedge(system, layoutWedge({ grid: '16x12', seed: 1 }), even, random).map(p => ({ ...p, deviation: null }))
    expect(evennessOf(print, grid.map(level => system.lightness(level))).texture).toBeNull()
    expect(() => evennessOf(print.slice(0, 59), grid)).toThrowError(expect.objectContaining({ code: 'too_few_levels' }))
  })
})
