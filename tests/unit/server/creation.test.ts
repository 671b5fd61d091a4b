import { describe, expect, it } from 'vitest'
import { bodyHashOf, createOnce } from '../../../server/services/creation'
import { slugOf } from '../../../server/services/people'
import { toPage } from '../../../server/services/paging'

describe('a body’s hash', () => {
  it('does not depend on the order of fields or on the id', () => {
    expect(bodyHashOf({ id: 'a', name: 'x', ink: { color: '#000000', mix: 1 } })).toBe(bodyHashOf({ ink: { mix: 1, color: '#000000' }, name: 'x', id: 'b' }))
  })
  it('depends on values, on what lies deeper and on the order of lists', () => {
    const hashes = [{ v: 1 }, { v: 2 }, { v: { w: 1 } }, { v: { w: 2 } }, { v: [1, 2] }, { v: [2, 1] }, { v: '1' }, { v: null }, {}].map(body => bodyHashOf(body))
    expect(new Set(hashes).size).toBe(hashes.length)
  })
  it('takes a field that is undefined for absent', () => {
    expect(bodyHashOf({ name: 'x', notes: undefined })).toBe(bodyHashOf({ name: 'x' }))
  })
})

describe('creating once', () => {
  const stored = { bodyHash: 'one', name: 'stored' }
  it('gives the new row', async () => {
    expect(await createOnce('one', async () => stored, async () => undefined)).toEqual({ created: true, row: stored })
  })
  it('gives the stored row for the same body', async () => {
    expect(await createOnce('one', async () => undefined, async () => stored)).toEqual({ created: false, row: stored })
  })
  it('refuses another body under the id', async () => {
    await expect(createOnce('two', async () => undefined, async () => stored)).rejects.toMatchObject({ code: 'id_taken' })
    await expect(createOnce('two', async () => undefined, async () => undefined)).rejects.toMatchObject({ code: 'id_taken' })
  })
})

describe('a studio’s slug', () => {
  it.each([['Rope Works', 'rope-works'], ['Ines’s studio', 'iness-studio'], ['Ålesund & Søn!', 'alesund-s-n'], ['紙', 'studio'], ['--', 'studio'], ['a'.repeat(90), 'a'.repeat(50)]])('of %s is %s', (name, slug) => {
    expect(slugOf(name)).toBe(slug)
  })
})

describe('a page', () => {
  const rows = [{ id: 'c' }, { id: 'b' }, { id: 'a' }]
  it('ends where there is no row more', () => {
    expect(toPage(rows, { limit: 3 }, row => row.id)).toEqual({ items: ['c', 'b', 'a'], nextCursor: null })
  })
  it('goes on after its last item', () => {
    expect(toPage(rows, { limit: 2 }, row => row.id)).toEqual({ items: ['c', 'b'], nextCursor: 'b' })
  })
})
