import { describe, expect, it } from 'vitest'
import { fileNameFrom, nameFromFileName } from '../../../server/services/file-names'
import { limits } from '#shared/schemas/limits'

describe('names from file names', () => {
  it.each([
    ['IMG_2041.JPG', 'IMG_2041'],
    ['C:\\Users\\ines\\river.png', 'river'],
    ['../../etc/passwd', 'passwd'],
    ['  the   rope\twalk .jpeg', 'the rope walk'],
    ['rope\u202Egpj.exe', 'ropegpj.exe'],
    ['nul\u0000l.jpg', 'null'],
    ['Bru\u0308cke.jpg', 'Brücke'],
    ['.jpg', 'Photo'],
    ['', 'Photo'],
  ])('%j becomes %j', (fileName, name) => expect(nameFromFileName(fileName)).toBe(name))

  it('are as long as the table takes, and never end in half a character', () => {
    expect(nameFromFileName('a'.repeat(10_000))).toHaveLength(limits.nameLength)
    const cut = nameFromFileName(`${'a'.repeat(limits.nameLength - 1)}😀.jpg`)
    expect(cut).toBe('a'.repeat(limits.nameLength - 1))
  })
})

describe('file names from names', () => {
  it.each([
    ['River: "low" water?', 'River- -low- water-.pdf'],
    ['...', 'file.pdf'],
    ['a/b\\c', 'a-b-c.pdf'],
  ])('%j becomes %j', (name, fileName) => expect(fileNameFrom(name, 'pdf')).toBe(fileName))
})
