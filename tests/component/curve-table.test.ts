import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import CurveTable from '../../components/curves/CurveTable.vue'
import { leftOver, responseBand, valueAt } from '../../utils/curve-chart'

/**
 * Derived by hand: a bench whose print lightness runs straight from 20 to 95 with ink, and the curve that follows it,
 * so that tone 40 % is ink 40 % and L* 20 + 0.4 · 75 = 50, whose density is −log₁₀(((50 + 16)/116)³) = 0.735 (CIE 15:2004, 8.2.1).
 */
const straight = {
  response: Array.from({ length: 1025 }, (_, i) => 20 + 75 * i / 1024),
  points: Array.from({ length: 257 }, (_, i) => ({ tone: i / 256, level: i / 256, levelLow: Math.max(0, i / 256 - 0.02), levelHigh: Math.min(1, i / 256 + 0.02) })),
}

describe('CurveTable', () => {
  it('writes tone, lightness, density, ink and band of 21 even steps', async () => {
    const table = await mountSuspended(CurveTable, { props: { curve: straight, caption: 'Curve 1' } })
    const rows = table.findAll('tbody tr').map(row => row.findAll('th, td').map(cell => cell.text()))
    expect(rows).toHaveLength(21)
    expect(rows[0]).toEqual(['0', '20.0', '1.52', '0.0', '0.0 – 2.0'])
    expect(rows[8]).toEqual(['40', '50.0', '0.73', '40.0', '38.0 – 42.0'])
    expect(rows[20]).toEqual(['100', '95.0', '0.06', '100.0', '98.0 – 100.0'])
  })

  it('leaves the band out where there is none', async () => {
    const points = straight.points.map(p => ({ ...p, levelLow: p.level, levelHigh: p.level }))
    const table = await mountSuspended(CurveTable, { props: { curve: { ...straight, points }, caption: 'Starter' } })
    expect(table.findAll('thead th').map(cell => cell.text())).toEqual(['Tone, %', 'Print, L*', 'Density', 'Ink, %'])
  })
})

describe('leftOver', () => {
  it('is measured less curve, with the band about zero', () => {
    const { points, band } = leftOver(straight, [[{ x: 40, y: 51.5 }, { x: 0, y: 20 }]])
    expect(points[0]![0]).toEqual({ x: 40, y: expect.closeTo(1.5, 6) })
    expect(points[0]![1]!.y).toBeCloseTo(0, 6)
    // ± 0.02 of ink on a slope of 75 L* is ± 1.5 L*
    expect(valueAt(band.lower, 50)).toBeCloseTo(-1.5, 2)
    expect(valueAt(band.upper, 50)).toBeCloseTo(1.5, 2)
  })
})

it('the band in the print keeps the lower edge below the upper one', () => {
  const { lower, upper } = responseBand(straight)
  for (let ink = 5; ink <= 95; ink += 5) expect(valueAt(lower, ink)).toBeLessThan(valueAt(upper, ink))
})
