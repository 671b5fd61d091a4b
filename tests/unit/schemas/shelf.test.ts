import { describe, expect, it } from 'vitest'
import { limits } from '../../../shared/schemas/limits'
import { factsOf, shelfBody, shelfKinds, type ShelfKind } from '../../../shared/schemas/shelf'
import { shelfFacts } from '../../../shared/schemas/shelf-facts'
import { fieldsOf } from '../../../utils/shelf-fields'

const pathsOf = (kind: ShelfKind, facts: unknown): string[] => {
  try {
    factsOf(kind, facts)
    return []
  }
  catch (error) {
    return (error as { issues: { path: (string | number)[] }[] }).issues.map(issue => issue.path.join('.'))
  }
}

describe('facts of the shelf', () => {
  it.each(shelfKinds)('of %s may all be left out, and each has its field on the screen', (kind) => {
    expect(factsOf(kind, {})).toEqual({})
    expect(fieldsOf(kind).map(field => field.key).sort()).toEqual(Object.keys(shelfFacts[kind].shape).sort())
  })

  it.each(shelfKinds)('of %s: the bounds of a field are those of the contract', (kind) => {
    for (const field of fieldsOf(kind)) {
      const bounds = field.as === 'figure' ? field.bounds : field.as === 'length' ? field.boundsMm : undefined
      if (!bounds) continue
      const [least, most] = bounds
      expect([field.key, pathsOf(kind, { [field.key]: least }), pathsOf(kind, { [field.key]: most })]).toEqual([field.key, [], []])
      expect(pathsOf(kind, { [field.key]: least - 0.01 * Math.max(1, least) })).toEqual([`facts.${field.key}`])
      expect(pathsOf(kind, { [field.key]: most * 1.01 })[0]).toBe(`facts.${field.key}`)
    }
  })

  it.each(shelfKinds)('of %s: each choice of a field is one of the contract’s', (kind) => {
    for (const field of fieldsOf(kind)) {
      if (field.as !== 'choice') continue
      for (const option of Object.keys(field.options)) expect([field.key, option, pathsOf(kind, { [field.key]: field.numeric ? Number(option) : option })]).toEqual([field.key, option, []])
      expect(pathsOf(kind, { [field.key]: 'none of these' })[0]).toBe(`facts.${field.key}`)
    }
  })

  it('are a drawer’s own: another’s are refused by name', () => {
    expect(pathsOf('films', { surface: 'rough' })).toEqual(['facts'])
    expect(pathsOf('papers', { sizes: [{ widthMm: 210 }] })).toEqual(['facts.sizes.0.heightMm'])
    expect(pathsOf('inkjets', { paths: [{ name: 'Film' }, { name: 'FILM' }] })).toEqual(['facts.paths'])
    expect(pathsOf('sensitizers', { parts: [{ name: ' ' }] })).toEqual(['facts.parts.0.name'])
    expect(pathsOf('papers', { lots: [{ name: 'Spring', since: '2026-02-30' }] })).toEqual(['facts.lots.0.since'])
    expect(pathsOf('lamps', { peakNanometres: Number.POSITIVE_INFINITY })).toEqual(['facts.peakNanometres'])
  })

  it('hold names and lines no longer than the tables and fields do', () => {
    expect(shelfBody.safeParse({ name: 'x'.repeat(limits.nameLength) }).success).toBe(true)
    expect(shelfBody.safeParse({ name: 'x'.repeat(limits.nameLength + 1) }).success).toBe(false)
    expect(pathsOf('papers', { maker: 'x'.repeat(limits.lineLength) })).toEqual([])
    expect(pathsOf('papers', { maker: 'x'.repeat(limits.lineLength + 1) })).toEqual(['facts.maker'])
  })
})
