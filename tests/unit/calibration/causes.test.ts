import { describe, expect, it } from 'vitest'
import type { CauseInput, DiagnosticPlaces } from '../../../shared/calibration/causes'
import { evidenceSays, findCauses } from '../../../shared/calibration/causes'

const nothing: DiagnosticPlaces = { foil: null, bare: null, clear: null, fullInk: null, uncoated: null }
const given = (places: Partial<DiagnosticPlaces>, more: Partial<CauseInput> = {}) => findCauses({ places: { ...nothing, ...places }, edge: null, isMirrored: false, lightSlopes: [], ...more })
const kinds = (causes: { code: string }[]): string[] => causes.map(c => c.code)

describe('the cause of a poor print', () => {
  it('is none where all is well, or where nothing was read', () => {
    expect(given({ foil: 95, bare: 22, clear: 22.4, fullInk: 94.6, uncoated: 95.5 })).toEqual([])
    expect(given({})).toEqual([])
  })

  // A trial of the trade: full ink 88 with foil 95, and both 88.
  it('is ink that lets UV through when full ink prints darker than foil', () => {
    const [cause, ...others] = given({ foil: 95, fullInk: 88 })
    expect(others).toEqual([])
    expect(cause).toMatchObject({ code: 'more-ink', message: expect.stringContaining('ink lets UV through') })
    expect(cause!.message).toContain('7.0 L*')
    expect(cause!.evidence).toEqual([{ what: 'under full ink', value: 88, unit: 'L*' }, { what: 'under foil', value: 95, unit: 'L*' }])
    expect(evidenceSays(cause!.evidence)).toBe('under full ink 88.0 L*, under foil 95.0 L*')
  })

  it('is stain or wash when both are dark, and the ink is left alone', () => {
    const [cause, ...others] = given({ foil: 88, fullInk: 88 })
    expect(others).toEqual([])
    expect(cause).toMatchObject({ code: 'wash', message: expect.stringMatching(/^Stain or wash.*leave the ink alone/) })
    expect(cause!.message).toContain('taken as L* 95')
    expect(given({ foil: 88, fullInk: 88, uncoated: 95 })[0]!.message).not.toContain('taken as')
  })

  it('is no stain where no foil was laid and the place printed as black', () => {
    expect(given({ foil: 18, bare: 18, clear: 18.3, fullInk: 94.1 })).toEqual([])
  })

  it('is no stain on a paper that is itself darker', () => {
    expect(given({ foil: 88, fullInk: 88, uncoated: 88.5 })).toEqual([])
  })

  it('can be both: stain, and ink that lets UV through on top of it', () => {
    const causes = given({ foil: 90, fullInk: 84, uncoated: 95 })
    expect(kinds(causes)).toEqual(['more-ink', 'wash'])
    expect(causes[1]!.message).not.toContain('leave the ink alone')
  })

  it('is too short an exposure when the paper beside the film is darker than through it', () => {
    expect(given({ bare: 20, clear: 26 })[0]).toMatchObject({ code: 'expose-longer', message: expect.stringContaining('6.0 L* darker') })
    expect(given({ bare: 20, clear: 20.8 })).toEqual([])
  })

  it('is poor contact when edges are softer than the scan makes them', () => {
    // At 300 pixels per inch 1.8 px are 0.15 mm: √(0.5² − 0.152²) = 0.476, derived
    const [cause] = given({}, { edge: { widthMm: 0.5, pixelsPerMm: 300 / 25.4 } })
    expect(cause!.code).toBe('press-harder')
    expect(cause!.evidence[1]!.value).toBeCloseTo(0.476, 3)
    // The same edges in a coarse picture may be the picture's own.
    expect(given({}, { edge: { widthMm: 0.5, pixelsPerMm: 4 } })).toEqual([])
    expect(given({}, { edge: { widthMm: 0.3, pixelsPerMm: 12 } })).toEqual([])
  })

  it('is a film that lay wrong side up when the print reads mirrored', () => {
    expect(given({}, { isMirrored: true })).toEqual([{ code: 'wrong-side-up', message: expect.stringContaining('printed side up'), evidence: [] }])
  })

  it('is the lamp when all prints fall off to the same side, not when each has its own', () => {
    const [cause] = given({}, { lightSlopes: [{ right: 2.1, down: 0.1 }, { right: 1.8, down: -0.3 }, { right: 2.4, down: 0.2 }] })
    expect(cause).toMatchObject({ code: 'rotate-frame', message: expect.stringMatching(/all 3 prints.*right.*2\.1 L\*/) })
    expect(given({}, { lightSlopes: [{ right: 2, down: 0 }, { right: -1.9, down: 0.4 }] })).toEqual([])
    expect(given({}, { lightSlopes: [{ right: 3, down: 0 }] })).toEqual([])
    expect(given({}, { lightSlopes: [{ right: 0.3, down: 0 }, { right: 0.4, down: 0 }] })).toEqual([])
  })
})
