import { describe, expect, it } from 'vitest'
import { rankCorrelation } from '../../../shared/calibration/measurement-checks'
import type { MeasuredValues } from '../../../shared/calibration/measurements'
import { readMeasurements } from '../../../shared/calibration/measurements'
import { lightnessFromDensity } from '../../../shared/tone/density'
import { lightnessFromLuminance } from '../../../shared/tone/lightness'

const levels = [0, 0.2, 0.4, 0.6, 0.8, 1]
const rising = [25, 38, 52, 68, 84, 95]
const lightness: MeasuredValues = { unit: 'lightness', values: levels.map((level, i) => ({ level, value: rising[i]! })) }
const densities = [1.4, 1.05, 0.74, 0.45, 0.2, 0.06]
const density: MeasuredValues = { unit: 'density', values: levels.map((level, i) => ({ level, value: densities[i]! })) }
const codes = (warnings: { code: string }[]): string[] => warnings.map(w => w.code)
const refusal = (code: string, part = '') => expect.objectContaining({ code, message: expect.stringContaining(part) })

describe('a JSON body', () => {
  it('keeps lightnesses as they are, in their order', () => {
    const { patches, unit, zero, warnings } = readMeasurements(lightness)
    expect(patches.map(p => p.lightness)).toEqual(rising)
    expect(patches.map(p => p.level)).toEqual(levels)
    expect([unit, zero, warnings]).toEqual(['lightness', 'absolute', []])
    const backwards = readMeasurements({ ...lightness, values: [...lightness.values].reverse() })
    expect(backwards.patches).toEqual([...patches].reverse())
  })

  it('converts densities and reflectances', () => {
    expect(readMeasurements(density).patches.map(p => p.lightness)).toEqual(densities.map(lightnessFromDensity))
    const reflectances = [0.04, 0.1, 0.2, 0.4, 0.6, 0.88]
    const { patches } = readMeasurements({ unit: 'reflectance', values: levels.map((level, i) => ({ level, value: reflectances[i]! })) })
    expect(patches.map(p => p.lightness)).toEqual(reflectances.map(lightnessFromLuminance))
  })

  it('echoes an absent zero as absolute and warns about it for densities', () => {
    const { zero, warnings } = readMeasurements(density)
    expect(zero).toBe('absolute')
    expect(codes(warnings)).toContain('zero_assumed_absolute')
    expect(codes(readMeasurements(density, { zero: 'absolute' }).warnings)).toEqual([])
  })

  it('adds the paper where people nulled on it: L* 95 and 1.38 above it make L* 22.5', () => {
    // 21 densities nulled on the paper, 0.00 … 1.38 (a trial of the trade)
    const values = Array.from({ length: 21 }, (_, i) => ({ level: i / 20, value: 1.38 * (1 - i / 20) }))
    const { patches, paperLightness, warnings } = readMeasurements({ unit: 'density', values }, { zero: 'paper', paperLightness: 95 })
    expect(patches.at(-1)!.lightness).toBeCloseTo(95, 1)
    expect(patches[0]!.lightness).toBeCloseTo(22.5, 1)
    expect(paperLightness).toBe(95)
    expect(warnings).toEqual([])
    expect(codes(readMeasurements({ unit: 'density', values }, { zero: 'paper' }).warnings)).toEqual(['paper_lightness_assumed'])
    expect(codes(readMeasurements({ unit: 'density', values }).warnings)).toEqual(['nulled_on_paper'])
  })

  it('applies the paper to lightness and reflectance as well', () => {
    const relative = [0.05, 0.1, 0.2, 0.4, 0.7, 1]
    const options = { zero: 'paper', paperLightness: 90 } as const
    const byReflectance = readMeasurements({ unit: 'reflectance', values: levels.map((level, i) => ({ level, value: relative[i]! })) }, options)
    const byLightness = readMeasurements({ unit: 'lightness', values: levels.map((level, i) => ({ level, value: lightnessFromLuminance(relative[i]!) })) }, options)
    expect(byReflectance.patches.at(-1)!.lightness).toBeCloseTo(90, 10)
    byReflectance.patches.forEach((patch, i) => expect(byLightness.patches[i]!.lightness).toBeCloseTo(patch.lightness, 10))
  })

  it('takes per cent, and says so', () => {
    const { patches, warnings } = readMeasurements({ unit: 'reflectance', values: levels.map((level, i) => ({ level: 100 * level, value: [4, 10, 20, 40, 60, 88][i]! })) })
    expect(patches[2]).toMatchObject({ level: 0.4, lightness: lightnessFromLuminance(0.2) })
    expect(codes(warnings)).toEqual(['levels_in_percent', 'reflectance_in_percent'])
  })

  it('warns of a local fall and of missing ends', () => {
    const values = [[0.1, 30], [0.3, 45], [0.5, 60], [0.6, 57.5], [0.8, 80], [0.9, 90]].map(([level, value]) => ({ level: level!, value: value! }))
    const { warnings } = readMeasurements({ unit: 'lightness', values })
    expect(codes(warnings)).toEqual(['not_monotone', 'no_clear_film', 'no_full_ink'])
    expect(warnings[0]!.message).toContain('2.5 L* between 50.0 % and 60.0 %')
  })
})

describe('what no curve can rest on', () => {
  const of = (pairs: [number, number][]): MeasuredValues => ({ unit: 'lightness', values: pairs.map(([level, value]) => ({ level, value })) })

  it('is refused: four levels, however often they were read', () => {
    const four = lightness.values.slice(0, 4)
    expect(() => readMeasurements({ unit: 'lightness', values: [...four, ...four, ...four] })).toThrowError(refusal('too_few_levels'))
    expect(() => readMeasurements({ unit: 'lightness', values: [] })).toThrowError(refusal('too_few_levels'))
  })

  it('is refused: less than 10 L* of range, less than 0.15 in a density channel', () => {
    expect(() => readMeasurements(of(levels.map((l, i) => [l, 60 + 1.9 * i])))).toThrowError(refusal('range_too_small', '9.5 L*'))
    expect(readMeasurements(of(levels.map((l, i) => [l, 60 + 2 * i]))).patches).toHaveLength(6)
    // A yellow gum layer read through the blue filter: a small range, but enough of one.
    const layer = (range: number): MeasuredValues => ({ unit: 'density', values: levels.map(level => ({ level, value: 0.06 + range * (1 - level) })) })
    expect(readMeasurements(layer(0.16), { channel: 'density-blue' }).patches).toHaveLength(6)
    expect(() => readMeasurements(layer(0.14), { channel: 'density-blue' })).toThrowError(refusal('range_too_small', '0.14'))
    expect(() => readMeasurements(layer(0.12))).toThrowError(refusal('range_too_small', 'L*'))
  })

  it('is refused: lightness that does not follow the level, with a hint where it runs backwards', () => {
    expect(() => readMeasurements(of(levels.map((l, i) => [l, [60, 90, 30, 85, 40, 70][i]!])))).toThrowError(refusal('levels_unrelated', 'beside its own level'))
    expect(() => readMeasurements(of(levels.map((l, i) => [1 - l, rising[i]!])))).toThrowError(refusal('levels_unrelated', 'other way'))
  })

  it('is refused, naming the row: values that no instrument gives', () => {
    const spoil = (value: Partial<{ level: number, value: number }>, unit: MeasuredValues['unit'] = 'lightness'): MeasuredValues =>
      ({ unit, values: lightness.values.map((v, i) => i === 2 ? { ...v, ...value } : unit === 'density' ? { ...v, value: densities[i]! } : v) })
    for (const source of [spoil({ value: -3 }), spoil({ value: 119 }), spoil({ value: Number.NaN }), spoil({ level: -0.2 }), spoil({ level: Number.NaN }), spoil({ value: 9 }, 'density')])
      expect(() => readMeasurements(source)).toThrowError(expect.objectContaining({ code: 'invalid_input', issues: [expect.objectContaining({ path: expect.stringMatching(/^values\.2\.(level|value)$/) })] }))
  })
})

describe('CSV', () => {
  const csv = (header: string, row: (level: number, i: number) => string): string => [header, ...levels.map(row)].join('\n')

  it('with commas, semicolons or tabs gives the same patches', () => {
    const wanted = readMeasurements(lightness).patches
    const comma = (v: number): string => String(v).replace('.', ',')
    const texts = [
      csv('level,lightness', (l, i) => `${l},${rising[i]}`),
      csv('Level ; Lightness', (l, i) => ` ${comma(l)} ; ${comma(rising[i]!)}`),
      csv('level\tL*', (l, i) => `${comma(l)}\t${comma(rising[i]!)}`),
      `\uFEFF${csv('name;ink_percent;L*', (l, i) => `patch ${i};${100 * l};${rising[i]}`)}\r\n\r\n`.replace(/\n/g, '\r\n'),
      csv('"level","lightness"', (l, i) => `"${l}","${rising[i]}"`),
    ]
    for (const text of texts) {
      readMeasurements(text).patches.forEach((patch, i) => {
        expect(patch.level).toBeCloseTo(wanted[i]!.level, 12)
        expect(patch.lightness).toBe(wanted[i]!.lightness)
      })
    }
  })

  it('of densities and reflectances is read by its header', () => {
    expect(readMeasurements(csv('level,density', (l, i) => `${l},${densities[i]}`), { zero: 'absolute' })).toEqual(readMeasurements(density, { zero: 'absolute' }))
    expect(readMeasurements(csv('level,reflectance', (l, i) => `${l},${[0.04, 0.1, 0.2, 0.4, 0.6, 0.88][i]}`)).unit).toBe('reflectance')
  })

  it.each([
    ['nothing', '', 'no values'],
    ['a header alone', 'level,lightness', 'no values'],
    ['no level', 'step,lightness\n1,20\n', 'ink level'],
    ['no value', 'level,colour\n1,20\n', 'measured value'],
    ['decimal commas between commas', 'level,lightness\n0,5,95,2\n', 'semicolons'],
    ['a word for a number', 'level,lightness\n0.5,dark\n', '"dark"'],
    ['a bare list', '1\n2\n3\n', 'ink level'],
    ['an open quote', 'level,lightness\n"0.5,20\n', 'Row'],
    ['an image', '\u0089PNG\r\n\u001A\n\u0000\u0000', 'ink level'],
  ])('with %s is refused with a sentence', (_, text, part) => {
    expect(() => readMeasurements(text)).toThrowError(refusal('unparsable', part))
  })
})

describe('CGATS text', () => {
  const cgats = (fields: string, rows: string[]): string => [
    'CGATS.17', 'ORIGINATOR "a spot instrument"', 'DESCRIPTOR "BEGIN DATA of a wedge"', '# a comment', `NUMBER_OF_FIELDS ${fields.split(' ').length}`,
    'BEGIN_DATA_FORMAT', fields, 'END_DATA_FORMAT', `NUMBER_OF_SETS ${rows.length}`, 'BEGIN_DATA', ...rows, 'END_DATA', '',
  ].join('\r\n')

  it('with CMYK_K and L*a*b* gives levels, lightness and colour', () => {
    const text = cgats('SAMPLE_ID SAMPLE_NAME CMYK_K LAB_L LAB_A LAB_B', levels.map((l, i) => `${i + 1} "patch ${i}" ${100 * l} ${rising[i]} 1.5 -20`))
    const { patches, unit } = readMeasurements(text)
    expect(unit).toBe('lightness')
    expect(patches.map(p => p.lightness)).toEqual(rising)
    expect(patches[1]).toEqual({ level: 0.2, lightness: 38, lab: [38, 1.5, -20] })
  })

  it('with visual densities and a column of our own', () => {
    const { patches, unit } = readMeasurements(cgats('SAMPLE_ID LEVEL D_VIS', levels.map((l, i) => `${i} ${l} ${densities[i]}`)))
    expect(unit).toBe('density')
    expect(patches.map(p => p.lightness)).toEqual(densities.map(lightnessFromDensity))
  })

  it('with XYZ_Y, in per cent of the perfect diffuser', () => {
    const { patches } = readMeasurements(cgats('INK_PERCENT XYZ_Y', levels.map((l, i) => `${100 * l} ${[4, 10, 20, 40, 60, 88][i]}`)))
    expect(patches[0]!.lightness).toBeCloseTo(lightnessFromLuminance(0.04), 12)
  })

  it('with a filter\'s density for a bench read through that filter', () => {
    const text = cgats('LEVEL D_VIS D_BLUE', levels.map((l, i) => `${l} 0.1 ${densities[i]}`))
    expect(readMeasurements(text, { channel: 'density-blue' }).patches.map(p => p.lightness)).toEqual(densities.map(lightnessFromDensity))
  })

  it.each([
    ['rows that do not fit the format', cgats('LEVEL D_VIS', ['0 1.4', '0.5']), 'rows of 2'],
    ['no format', 'CGATS.17\nBEGIN_DATA\n1 2\nEND_DATA\n', 'BEGIN_DATA_FORMAT'],
    ['no end', 'CGATS.17\nBEGIN_DATA_FORMAT\nLEVEL D_VIS\nEND_DATA_FORMAT\nBEGIN_DATA\n1 2\n', 'END_DATA'],
    ['no data', cgats('LEVEL D_VIS', []), 'no data'],
  ])('with %s is refused with a sentence', (_, text, part) => {
    expect(() => readMeasurements(text)).toThrowError(refusal('unparsable', part))
  })
})

describe('rank correlation', () => {
  it('is Spearman\'s, ties by mean rank', () => {
    // By hand: ranks 1 2.5 2.5 4 against 1 2 3 4: Σxy 4.5, Σxx 4.5, Σyy 5 about the means.
    expect(rankCorrelation([1, 2, 2, 3], [1, 2, 3, 4])).toBeCloseTo(4.5 / Math.sqrt(4.5 * 5), 12)
    expect(rankCorrelation([1, 2, 3], [9, 5, 1])).toBeCloseTo(-1, 12)
    expect(rankCorrelation([1, 2, 3], [7, 7, 7])).toBe(0)
  })
})
