import { describe, expect, it } from 'vitest'
import { comparedFigures, comparisonPlot } from '../../../utils/compare-plot'
import { patchesToMeasure, placesOf, profilePlot } from '../../../utils/scanner-plot'
import { shortExposure, stripPlot } from '../../../utils/strip-plot'
import { evenTablet, filmPlot, scaleText, tabletPlot } from '../../../utils/tablet-plots'

describe('a strip’s plot', () => {
  const points = [30, 60, 120, 240].map((exposure, i) => ({ exposure, lightness: 80 - 15 * i, isRepeat: i === 3 }))
  it('counts stops, writes times, and stands for the base exposure with its bounds', () => {
    const plot = stripPlot({ unit: 's', points, line: [], base: { value: 120, low: 60, high: 480 } })
    expect([plot.x.min, plot.x.max, plot.x.step]).toEqual([Math.log2(30), Math.log2(240), 1])
    expect(plot.x.write(Math.log2(240))).toBe('4:00')
    expect(plot.places![0]).toEqual({ x: Math.log2(120), name: '2 min', low: Math.log2(60), high: Math.log2(480) })
    expect(plot.dots!.map(d => [d.mark, d.points.length])).toEqual([['circle', 3], ['triangle', 1]])
  })

  it('reaches as far as a base exposure beyond the strip', () => {
    const plot = stripPlot({ unit: 's', points, line: [], base: { value: 700, low: null, high: null } })
    expect(2 ** plot.x.max).toBeGreaterThanOrEqual(700)
  })

  it('writes ticks that are short', () => {
    expect([4.24, 42.4, 85, 339.4, 4000].map(value => shortExposure(value, 's'))).toEqual(['4.2 s', '42 s', '1:25', '5:39', '1 h 6'])
    expect(shortExposure(12.5, 'dose')).toBe('13')
  })
})

describe('a tablet', () => {
  it('has 21 steps, 0.15 apart, unless its own densities are known', () => {
    const rows = evenTablet()
    expect([rows.length, rows[1]!.density, rows[20]!.density]).toEqual([21, '0.20', '3.05'])
  })

  it('shows the step to expose for', () => {
    // CIE 15:2004, 8.2.1: density 1 is L* 37.84
    const plot = tabletPlot([{ density: 0.3, lightness: 60 }, { density: 0, lightness: 20 }, { density: 0.15, lightness: 37.84 }], 2)
    expect(plot.places).toEqual([{ x: 0.15, name: 'step 2' }])
    expect(plot.lines[0]!.points[1]!.y).toBeCloseTo(1, 3)
  })

  it('tells a scale in stops, too', () => {
    // derived: a stop is log₁₀ 2 = 0.301
    expect(scaleText(1.806)).toBe('1.81 in log exposure, 6.0 stops')
  })
})

it('the film’s band is twice its deviation to either side', () => {
  const { band } = filmPlot([{ level: 0, density: 0, deviation: 0.01 }, { level: 1, density: 2, deviation: 0.05 }])
  expect(band!.lower[1]).toEqual({ x: 100, y: 1.9 })
  expect(band!.upper[1]).toEqual({ x: 100, y: 2.1 })
})

describe('a scanner’s profile', () => {
  it('is held beyond its ends', () => {
    const { lines } = profilePlot([{ scanned: 90, measured: 92 }, { scanned: 20, measured: 15 }])
    expect(lines[0]!.points).toEqual([{ x: 0, y: -5 }, { x: 20, y: -5 }, { x: 90, y: 2 }, { x: 100, y: 2 }])
  })

  it('asks for patches spread over all tones, each once, and none that was left out', () => {
    const patches = Array.from({ length: 384 }, (_, i) => ({ lightness: i === 5 ? null : 20 + (i * 37 % 384) / 384 * 75, used: i !== 7 }))
    const chosen = patchesToMeasure(patches)
    expect(new Set(chosen).size).toBe(12)
    expect(chosen).not.toContain(5)
    expect(chosen).not.toContain(7)
    const tones = chosen.map(i => patches[i]!.lightness!)
    // twelve from 20 to 95: neighbours 6.8 apart, a patch every 0.2
    tones.slice(1).forEach((tone, i) => expect(tone - tones[i]!).toBeCloseTo(6.8, 0))
  })

  it('names places as the print reads', () => {
    expect(placesOf([{ xMm: 7, yMm: 0 }, { xMm: 0, yMm: 7.04 }, { xMm: 0, yMm: 0 }])).toEqual([{ row: 1, column: 2 }, { row: 2, column: 1 }, { row: 1, column: 1 }])
  })
})

describe('two benches compared', () => {
  const one = { benchId: 'a', name: 'Blue on cotton', curveId: 'c', version: 2, response: [20, 60, 95], paperLightness: 95, deepestLightness: 20, maxDensity: 1.52, densityRange: 1.46, contrast: 1.2, evenness: { texture: 0.8, mottle: 1.1, gradient: 2 } }
  const other = { ...one, name: 'Blue on washi', version: 1, response: [30, 50, 92], evenness: null }
  it('stand on the same axes, each named on its outer side', () => {
    const plot = comparisonPlot([one, other])
    expect([plot.y.min, plot.y.max]).toEqual([20, 100])
    expect(plot.lines.map(line => [line.name, line.nameSide, line.kind])).toEqual([['Blue on cotton', 'above', undefined], ['Blue on washi', 'below', 'second']])
  })

  it('are told apart by their versions when they bear one name', () => {
    expect(comparisonPlot([one, { ...other, name: one.name }]).lines.map(line => line.name)).toEqual(['Blue on cotton, curve 2', 'Blue on cotton, curve 1'])
  })

  it('show evenness where at least one was measured for it', () => {
    expect(comparedFigures([one, other]).find(figure => figure.name === 'Mottle')).toMatchObject({ first: '1.1 L*', second: 'not measured' })
    expect(comparedFigures([{ ...one, evenness: null }, other]).some(figure => figure.name === 'Mottle')).toBe(false)
  })
})
