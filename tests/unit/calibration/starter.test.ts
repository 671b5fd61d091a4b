import { describe, expect, it } from 'vitest'
import { assumedFullInkDensity, starterResponse } from '../../../shared/calibration/starter'
import { densityFromLightness } from '../../../shared/tone/density'
import { positionOf } from '../../../shared/tone/response'

const withStarter = ['cyanotype', 'van-dyke', 'salt', 'kallitype', 'platinum-palladium', 'gum'] as const

describe('starter response', () => {
  it.each(withStarter)('of %s rises from an assumed deepest tone to an assumed paper', (process) => {
    const { response } = starterResponse(process)
    expect(response).toHaveLength(1025)
    response.forEach((value, i) => { if (i > 0 && !(value > response[i - 1]!)) expect.fail(`value ${i}`) })
    expect(response[0]).toBeGreaterThan(15)
    expect(response[1024]).toBeLessThan(96)
  })

  it.each(withStarter)('of %s prints every number it rests on, each with its source or the lack of one', (process) => {
    const { response, assumptions } = starterResponse(process)
    const text = assumptions.join(' ')
    expect(assumptions[0]).toContain('Uncalibrated')
    expect(text).toContain(`UV density ${assumedFullInkDensity}`)
    expect(text).toContain(`L* ${response[0]}`)
    expect(text).toContain(`L* ${response[1024]}`)
    expect(assumptions.filter(s => /taken as|taken to/.test(s) && !s.includes('base exposure')).every(s => s.includes('no source'))).toBe(true)
  })

  it.each(withStarter)('of %s spans its exposure scale of film density', (process) => {
    const { response, assumptions } = starterResponse(process)
    const scale = Number(/is taken as (\d\.\d) in log exposure/.exec(assumptions.join(' '))![1])
    const densities = response.map(densityFromLightness)
    const [deepest, paper] = [densities[0]!, densities[1024]!]
    // Half of the density range lies half an exposure scale from the base exposure, by the model's symmetry.
    const half = positionOf(densities.map(d => -d), -(deepest + paper) / 2)
    expect(Math.abs(half * assumedFullInkDensity - scale / 2)).toBeLessThan(0.03)
  })

  it.each(['carbon', 'other'] as const)('is refused for %s', (process) => {
    expect(() => starterResponse(process)).toThrowError(expect.objectContaining({ code: 'no_starter_curve' }))
  })
})
