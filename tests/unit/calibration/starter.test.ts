import { describe, expect, it } from 'vitest'
import { assumedFullInkDensity, starterInShort, starterResponse } from '../../../shared/calibration/starter'
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

  it.each(withStarter)('of %s says at which ink level its tones end, as its own response has it', (process) => {
    const { response, assumptions } = starterResponse(process)
    const said = Number(/is left at (\d+) % ink/.exec(assumptions.join(' '))![1])
    const densities = response.map(densityFromLightness)
    const [deepest, paper] = [densities[0]!, densities[1024]!]
    // 1 % of the range as the logistic has it, before its ends are stretched by at most 1 % of the range: derived, so between 0 and 2 % here.
    const left = (densities[Math.round(said / 100 * 1024)]! - paper) / (deepest - paper)
    expect(left).toBeGreaterThan(0)
    expect(left).toBeLessThan(0.02)
  })

  it('of a printing-out process and of gum does not call its base exposure the shortest for full black', () => {
    for (const process of withStarter) {
      const base = starterResponse(process).assumptions.at(-1)!
      expect([process, base.includes('full black')]).toEqual([process, process !== 'salt' && process !== 'gum'])
    }
  })

  it.each(withStarter)('of %s says in one line what it stands on', (process) => {
    const { response } = starterResponse(process)
    expect(starterInShort(process)).toContain(`UV density ${assumedFullInkDensity}`)
    expect(starterInShort(process)).toContain(`L* ${response[0]}`)
  })

  it.each(['carbon', 'other'] as const)('is refused for %s', (process) => {
    expect(() => starterResponse(process)).toThrowError(expect.objectContaining({ code: 'no_starter_curve' }))
    expect(() => starterInShort(process)).toThrowError(expect.objectContaining({ code: 'no_starter_curve' }))
  })
})
