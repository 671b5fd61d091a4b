import { describe, expect, it } from 'vitest'
import { factsOf, shelfKinds, type ShelfItem, type ShelfKind } from '../../../shared/schemas/shelf'
import { pathNameOf, recipeLines } from '../../../utils/bench-words'
import { asCopy, blankLot, blankPart, blankPath, shelfDraft, writtenFacts } from '../../../utils/shelf-draft'
import { factLines, inShort } from '../../../utils/shelf-words'

/** Every fact of every kind, invented. */
const whole: Record<ShelfKind, object> = {
  papers: {
    maker: 'The mill down the river', weightGramsPerM2: 300, surface: 'hot-pressed', fibre: 'cotton', sizing: 'gelatine', alkalineReserve: 'no', pretreatment: 'none', coatedSide: 'felt side',
    coatingMillilitresPerM2: 29.06, white: { lightness: 96.4, a: -0.6, b: 2.1 }, sizes: [{ widthMm: 560, heightMm: 760 }], lots: [{ name: 'Spring', since: '2026-03-02', notes: 'warm' }],
  },
  sensitizers: {
    process: 'cyanotype', parts: [{ name: 'A', madeOn: '2026-11-02', amount: '100 mL', substances: [{ substance: 'Ferric ammonium citrate', amount: '25 g' }, { substance: 'Water' }] }],
    mixing: 'Equal volumes.', keeps: 'a day', keptIn: 'brown bottle', safetySheet: 'red folder',
  },
  films: { maker: 'Nobody', thicknessMicrometres: 135, coatedSide: 'the duller side', dryingMinutes: 45, baseDensityUv: 0.065, sizes: [{ widthMm: 210, heightMm: 297 }], rollWidthMm: 432, lots: [{ name: '7' }] },
  inkjets: {
    model: 'Seventeen', inks: 'pigment', nativePixelsPerInch: [360, 720], widestSheetMm: 432, unprintableMm: { top: 3, bottom: 14 }, scaleX: 1.0012, scaleY: 0.9994,
    paths: [{ name: 'Film, best', fileKind: 'tiff', bitDepth: 16, sentBy: 'network', pixelsPerInch: 720, mediaType: 'film', quality: 'best', colourAdjustment: 'off', filmSide: 'duller' }],
  },
  lamps: { source: 'tubes', peakNanometres: 368, watts: 160, distanceMm: 110, warmUpMinutes: 3, integrator: 'yes', burnedHours: 640, renewedOn: '2025-01-15', evenness: 'corners −10 %', shielding: 'a lid' },
  scanners: { model: 'Flat', kind: 'flatbed', pixelsPerInch: 300, bitDepth: 16, transparency: 'yes', area: { widthMm: 216, heightMm: 297 }, program: 'plain', corrections: 'off', colourProfile: 'own' },
}
const item = (kind: ShelfKind, facts: object = whole[kind]) => ({ kind, name: 'Thing', notes: '', facts }) as unknown as ShelfItem

describe('a draft of a record', () => {
  it.each(shelfKinds)('of %s holds every fact and gives back what was stored', (kind) => {
    expect(factsOf(kind, whole[kind])).toEqual(whole[kind])
    expect(writtenFacts(kind, shelfDraft(kind, item(kind)))).toEqual(whole[kind])
  })

  it.each(shelfKinds)('of %s that nobody has written in leaves everything out', (kind) => {
    expect(writtenFacts(kind, shelfDraft(kind))).toEqual({})
  })

  it('leaves out rows that hold nothing, and blanks', () => {
    const paper = shelfDraft('papers')
    Object.assign(paper.facts, { lots: [blankLot(), { ...blankLot(), name: ' Spring ' }], maker: '  ' })
    expect(writtenFacts('papers', paper)).toEqual({ lots: [{ name: 'Spring' }] })
    const sensitizer = shelfDraft('sensitizers')
    sensitizer.facts.parts = [{ ...blankPart(), name: 'A' }, blankPart()]
    expect(writtenFacts('sensitizers', sensitizer)).toEqual({ parts: [{ name: 'A' }] })
    const inkjet = shelfDraft('inkjets')
    inkjet.facts.paths = [blankPath()]
    expect(writtenFacts('inkjets', inkjet)).toEqual({})
  })

  it('leaves the stored record alone', () => {
    const stored = item('papers', structuredClone(whole.papers))
    const draft = shelfDraft('papers', stored)
    ;(draft.facts.lots as { name: string }[])[0]!.name = 'Autumn'
    ;(draft.facts.sizes as { widthMm: number }[])[0]!.widthMm = 1
    expect(stored.facts).toEqual(whole.papers)
  })

  it('becomes a copy without the old one’s lots, hours and days, but with what was written for the new one', () => {
    const old = item('lamps')
    const copy = asCopy('lamps', shelfDraft('lamps', old), old)
    expect(copy.name).toBe('Thing, copy')
    expect(writtenFacts('lamps', copy)).toEqual(Object.fromEntries(Object.entries(whole.lamps).filter(([key]) => key !== 'burnedHours' && key !== 'renewedOn')))
    const changed = shelfDraft('lamps', old)
    changed.name = 'New tubes'
    changed.facts.burnedHours = 0
    expect(asCopy('lamps', changed, old)).toMatchObject({ name: 'New tubes', facts: { burnedHours: 0, renewedOn: '' } })
  })
})

describe('a record in words', () => {
  it.each(shelfKinds)('of %s shows each fact that is known, and nothing of what is not', (kind) => {
    expect(factLines(item(kind), 'mm').map(line => line.key).sort()).toEqual(Object.keys(whole[kind]).sort())
    expect(factLines(item(kind, {}), 'mm')).toEqual([])
    expect(inShort(item(kind, {}), 'mm')).toBe('')
    expect(JSON.stringify(factLines(item(kind), 'mm'))).not.toMatch(/undefined|null|NaN|\[object/)
  })

  it('says lengths in the reader’s unit', () => {
    const width = (unit: 'mm' | 'inch') => factLines(item('inkjets'), unit).find(line => line.key === 'widestSheetMm')!.lines
    expect([width('mm'), width('inch')]).toEqual([['432 mm'], ['17.01 in']]) // 432 / 25.4 = 17.008
    expect(inShort(item('lamps'), 'mm')).toBe('fluorescent tubes, 368 nm, 11 cm, 3 min warm-up, counts light units')
    expect(inShort(item('lamps'), 'inch')).toContain('4.33 in') // 110 / 25.4 = 4.331
  })

  it('names the newest lot by its day, wherever it stands in the list', () => {
    const lots = [{ name: 'Autumn', since: '2026-10-11' }, { name: 'Spring', since: '2026-03-02' }, { name: 'Undated' }]
    expect(inShort(item('papers', { lots }), 'mm')).toBe('lot Autumn')
    expect(inShort(item('papers', { lots: [{ name: 'First' }, { name: 'Second' }] }), 'mm')).toBe('lot Second')
  })

  it('knows a bench’s path by the inkjet’s name for it, only where every setting is the same', () => {
    const paths = [{ name: 'Film, best', fileKind: 'tiff' as const, bitDepth: 16 as const, pixelsPerInch: 720 }, { name: 'Quick', fileKind: 'pdf' as const }]
    expect(pathNameOf(paths, { fileKind: 'tiff', bitDepth: 16, pixelsPerInch: 720 })).toBe('Film, best')
    expect(pathNameOf(paths, { fileKind: 'tiff', bitDepth: 16, pixelsPerInch: 360 })).toBeUndefined()
    expect(pathNameOf(paths, { fileKind: 'tiff', bitDepth: 16, pixelsPerInch: 720, quality: 'best' })).toBeUndefined()
    expect(pathNameOf([{ name: 'Empty' }], {})).toBeUndefined()
  })

  it('tells a recipe in the order of the work, what is written down only', () => {
    expect(recipeLines({ toner: 'none', coats: 2, coatedWith: 'rod', developerTemperatureCelsius: 20.5 }).map(line => `${line.name}: ${line.text}`)).toEqual(['Coating: Two coats, rod', 'Developer: 20.5 °C', 'Toner: none'])
    expect(recipeLines({})).toEqual([])
  })
})
