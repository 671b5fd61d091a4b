import { describe, expect, it } from 'vitest'
import { filmOrder, filmSize, renderKey, resolveCrop } from '../../../server/services/film-order'
import type { NegativeParts } from '../../../server/services/negative-parts'
import { negativeWarnings, photoPixelsPerInch } from '../../../server/services/negative-warnings'
import { adjustments } from '#shared/schemas/negatives'
import type { NegativeSettings } from '../../../server/db/schema'

const settings: NegativeSettings = {
  size: { widthMm: 203.2, heightMm: 254 }, fit: 'crop', crop: null, quarterTurns: 0, straightenDegrees: 0, pixelsPerInch: 360,
  mirror: true, adjustments: adjustments.parse({}), margin: { mm: 10, kind: 'clear' }, marks: { ruler: true, label: true },
}

function partsWith(changes: { settings?: Partial<NegativeSettings>, negative?: object, photo?: object, bench?: object, curve?: object } = {}): NegativeParts {
  return {
    negative: { id: 'n', studioId: 's', name: 'Weir', aim: 'even-lightness', settings: { ...settings, ...changes.settings }, ...changes.negative },
    photo: { id: 'p', width: 4000, height: 3000, sha256: 'ab', ...changes.photo },
    bench: { id: 'b', name: 'Mill paper', process: 'cyanotype', ink: { color: '#000000' }, mirror: true, path: {}, ...changes.bench },
    curve: { id: 'c', version: 2, calibrated: true, assumptions: [], response: [20, 95], ...changes.curve },
  } as unknown as NegativeParts
}

describe('the part of the picture that is printed', () => {
  it('is the largest centred part of the print’s shape', () => {
    // By hand: a 4000 × 3000 photo on 4 : 5 keeps its height and 2400 of its width.
    expect(resolveCrop({ width: 4000, height: 3000 }, settings)).toEqual({ x: 0.2, y: 0, width: 0.6, height: 1 })
  })

  it('is the chosen crop trimmed evenly to that shape, or the whole chosen crop when it is to be contained', () => {
    const crop = { x: 0.1, y: 0.2, width: 0.8, height: 0.8 }
    // By hand: 3200 × 2400 pixels on 4 : 5 keep 1920 × 2400, so 0.48 of the width, from 0.1 + 0.16.
    const trimmed = resolveCrop({ width: 4000, height: 3000 }, { ...settings, crop })
    expect(trimmed.x).toBeCloseTo(0.26, 12)
    expect(trimmed).toMatchObject({ y: 0.2, height: 0.8 })
    expect(trimmed.width).toBeCloseTo(0.48, 12)
    expect(resolveCrop({ width: 4000, height: 3000 }, { ...settings, crop, fit: 'contain' })).toEqual(crop)
  })
})

it('gives a film round(size) + 2 · round(margin) pixels', () => {
  // By hand: 8 × 10 in at 360 are 2880 × 3600; 10 mm are 141.73 → 142.
  expect(filmSize(settings)).toEqual({ widthPixels: 3164, heightPixels: 3884, widthMm: 223.2, heightMm: 274 })
})

describe('render keys', () => {
  const keyOf = (changes: Parameters<typeof partsWith>[0] = {}, format: 'tiff' | 'pdf' = 'tiff') => {
    const parts = partsWith(changes)
    return renderKey(parts.photo.sha256, filmOrder(parts, format))
  }

  it('are equal for equal films, whatever record asks', () => {
    expect(keyOf({ negative: { id: 'other', revision: 9 }, photo: { id: 'q' }, bench: { id: 'c' } })).toBe(keyOf())
    expect(keyOf({ settings: { marks: { ruler: true, label: false } }, negative: { name: 'Other' } })).toBe(keyOf({ settings: { marks: { ruler: true, label: false } } }))
  })

  it('differ for everything that changes the file', () => {
    const keys = [
      keyOf(), keyOf({}, 'pdf'), keyOf({ photo: { sha256: 'cd' } }), keyOf({ curve: { response: [20, 94] } }), keyOf({ negative: { aim: 'even-density' } }),
      keyOf({ negative: { name: 'Other' } }), keyOf({ bench: { ink: { color: '#20a040' } } }), keyOf({ settings: { mirror: false } }), keyOf({ settings: { pixelsPerInch: 300 } }),
      keyOf({ settings: { margin: { mm: 10, kind: 'opaque' } } }), keyOf({ settings: { quarterTurns: 2 } }), keyOf({ settings: { adjustments: { ...settings.adjustments, midtone: 0.1 } } }),
      keyOf({ settings: { size: { widthMm: 203.3, heightMm: 254 } } }),
    ]
    expect(new Set(keys).size).toBe(keys.length)
  })
})

describe('warnings', () => {
  const codes = (changes: Parameters<typeof partsWith>[0], formats: ('tiff' | 'png' | 'pdf')[] = []) => negativeWarnings(partsWith(changes), formats).map(w => w.code)

  it('stay away when everything fits', () => {
    expect(codes({ bench: { path: { pixelsPerInch: 360, fileKind: 'tiff' } } }, ['tiff'])).toEqual([])
  })

  it('count the photo’s own pixels for an inch of print', () => {
    // By hand: 2400 pixels on 8 in are 300.
    expect(photoPixelsPerInch(partsWith())).toBeCloseTo(300, 9)
    expect(codes({ photo: { width: 1600, height: 1200 } })).toEqual(['few_pixels'])
  })

  it.each([
    ['an uncalibrated curve', { curve: { calibrated: false, assumptions: ['Full ink is UV density 2.5.'] } }, [], 'uncalibrated'],
    ['a film that is not mirrored as the bench wants', { settings: { mirror: false } }, [], 'mirror_differs'],
    ['another resolution than the bench’s path', { bench: { path: { pixelsPerInch: 720 } } }, [], 'other_path'],
    ['another file kind than the bench’s path', { bench: { path: { pixelsPerInch: 360, fileKind: 'tiff' } } }, ['pdf'], 'other_file_kind'],
    ['a resolution that is no inkjet’s own', { settings: { pixelsPerInch: 350 } }, [], 'resolution_not_native'],
    ['marks without a margin for them', { settings: { margin: { mm: 2, kind: 'clear' } } }, [], 'no_room_for_marks'],
  ] as const)('name %s', (_, changes, formats, code) => expect(codes(changes as object, [...formats])).toEqual([code]))
})
