import { bodyOf, type Box, boxesOf } from './boxes'

/** ISO/IEC 23008-12 (HEIF) and ISO/IEC 14496-12, 8.11: what the meta box says of its items. Broken bytes throw RangeError. */
export interface HeifItems {
  primary: number
  typeOf: (item: number) => string | undefined
  propertiesOf: (item: number) => Box[]
  /** items that one is made of (`dimg`), or that it adds to (`auxl`, from the added one) */
  references: (kind: string) => { from: number, to: number[] }[]
  /** where an item's first bytes stand: in the file, or in the meta box's own data */
  placeOf: (item: number) => { within: 'file' | 'meta', offset: number, length: number } | null
  /** the meta box's own data */
  own: Buffer
}

export function readHeifItems(meta: Buffer): HeifItems {
  const boxes = boxesOf(meta)
  const pitm = bodyOf(boxes, 'pitm')
  const iprp = boxesOf(bodyOf(boxes, 'iprp'))
  const all = boxesOf(bodyOf(iprp, 'ipco'))
  const indices = propertyIndices(bodyOf(iprp, 'ipma'))
  const types = itemTypes(boxes.find(({ type }) => type === 'iinf')?.body)
  const references = itemReferences(boxes.find(({ type }) => type === 'iref')?.body)
  const places = itemPlaces(boxes.find(({ type }) => type === 'iloc')?.body)
  return {
    primary: pitm[0] === 0 ? pitm.readUInt16BE(4) : pitm.readUInt32BE(4),
    typeOf: item => types.get(item),
    propertiesOf: item => (indices.get(item) ?? []).flatMap(index => all[index - 1] ?? []),
    references: kind => references.filter(reference => reference.kind === kind),
    placeOf: item => places.get(item) ?? null,
    own: boxes.find(({ type }) => type === 'idat')?.body ?? Buffer.alloc(0),
  }
}

/** Indices from 1 of items' properties in ipma (HEIF 9.3.1): longer ids from version 1, longer indices with flag 1. */
function propertyIndices(ipma: Buffer): Map<number, number[]> {
  const [longIds, longIndices] = [ipma[0]! >= 1, (ipma[3]! & 1) === 1]
  const byItem = new Map<number, number[]>()
  let at = 8
  for (let entry = 0, entries = ipma.readUInt32BE(4); entry < entries && at < ipma.length; entry++) {
    const id = longIds ? ipma.readUInt32BE(at) : ipma.readUInt16BE(at)
    at += longIds ? 4 : 2
    const count = ipma.readUInt8(at++)
    byItem.set(id, Array.from({ length: count }, (_, i) => longIndices ? ipma.readUInt16BE(at + 2 * i) & 0x7fff : ipma.readUInt8(at + i) & 0x7f))
    at += count * (longIndices ? 2 : 1)
  }
  return byItem
}

/** infe, version 2 and 3 (14496-12, 8.11.6). */
function itemTypes(iinf: Buffer | undefined): Map<number, string> {
  const types = new Map<number, string>()
  if (!iinf) return types
  for (const { type, body } of boxesOf(iinf.subarray(iinf[0] === 0 ? 6 : 8))) {
    if (type !== 'infe' || body[0]! < 2) continue
    const [id, at] = body[0] === 2 ? [body.readUInt16BE(4), 8] : [body.readUInt32BE(4), 10]
    types.set(id, body.toString('latin1', at, at + 4))
  }
  return types
}

/** iref (8.11.12): longer ids from version 1. */
function itemReferences(iref: Buffer | undefined): { kind: string, from: number, to: number[] }[] {
  if (!iref) return []
  const size = iref[0] === 0 ? 2 : 4
  return boxesOf(iref.subarray(4)).map(({ type, body }) => {
    const count = body.readUInt16BE(size)
    return { kind: type, from: body.readUIntBE(0, size), to: Array.from({ length: Math.min(count, 70_000) }, (_, i) => body.readUIntBE(size + 2 + size * i, size)) }
  })
}

/** iloc (8.11.3): the first extent of each item. */
function itemPlaces(iloc: Buffer | undefined): Map<number, { within: 'file' | 'meta', offset: number, length: number }> {
  const places = new Map<number, { within: 'file' | 'meta', offset: number, length: number }>()
  if (!iloc) return places
  const version = iloc[0]!
  const [offsetSize, lengthSize, baseSize, indexSize] = [iloc[4]! >> 4, iloc[4]! & 15, iloc[5]! >> 4, version === 0 ? 0 : iloc[5]! & 15]
  const idSize = version < 2 ? 2 : 4
  let at = 6
  const next = (size: number): number => {
    const value = size === 0 ? 0 : size === 8 ? Number(iloc.readBigUInt64BE(at)) : iloc.readUIntBE(at, size)
    at += size
    return value
  }
  for (let items = next(idSize); items > 0 && at < iloc.length; items--) {
    const id = next(idSize), method = version === 0 ? 0 : next(2) & 15
    next(2)
    const base = next(baseSize), extents = next(2)
    for (let extent = 0; extent < extents; extent++) {
      next(indexSize)
      const offset = base + next(offsetSize), length = next(lengthSize)
      if (extent === 0 && method < 2) places.set(id, { within: method === 0 ? 'file' : 'meta', offset, length })
    }
  }
  return places
}
