import type { PictureNote } from '#shared/schemas/picture-formats'
import { type Box, findMeta } from './boxes'
import { type CodedSides, sidesOfAv1, sidesOfHevc } from './coded-sides'
import type { FileWindow } from './file-window'
import { type CodePoints, type PictureHeader, profileMaxBytes, unreadable } from './header'
import { type HeifItems, readHeifItems } from './heif-items'

const brands = new Set(['heic', 'heix', 'hevc', 'hevx', 'heim', 'heis', 'mif1', 'mif2', 'msf1', 'avif', 'avis'])

/** True for a HEIF file, whatever its pictures are coded as. */
export function isHeif(start: Buffer): boolean {
  if (start.length < 16 || start.toString('latin1', 4, 8) !== 'ftyp') return false
  const end = Math.min(start.length, start.readUInt32BE(0))
  return Array.from({ length: Math.max(0, Math.floor((end - 8) / 4)) }, (_, i) => start.toString('latin1', 8 + 4 * i, 12 + 4 * i)).some(brand => brands.has(brand))
}

/** Facts of the primary picture, from its properties and from what its coded data says of itself. Sides are the upright ones. */
export async function readHeifHeader(window: FileWindow): Promise<PictureHeader> {
  const items = readHeifItems(await findMeta(window))
  const { primary } = items
  const own = items.propertiesOf(primary)
  const parts = items.references('dimg').find(({ from }) => from === primary)?.to ?? []
  const [coded = primary] = parts
  const codec = items.typeOf(coded)
  if (codec !== 'hvc1' && codec !== 'av01') throw unreadable(`its picture is coded in a way that is not read (${codec?.replace(/[^\w ]/g, '?') ?? 'unnamed'})`)
  const claimed = sidesOf(own)
  if (claimed.width === 0 || claimed.height === 0) throw unreadable('its header makes no sense')
  const properties = [...own, ...coded === primary ? [] : items.propertiesOf(coded)]
  const colour = coloursOf(properties)
  const turned = own.some(({ type, body }) => type === 'irot' && (body[0]! & 1) === 1)
  const bits = depthOf(codec, properties)
  return {
    format: codec === 'hvc1' ? 'heic' : 'avif',
    width: turned ? claimed.height : claimed.width, height: turned ? claimed.width : claimed.height, orientation: 1,
    bitDepth: bits > 8 ? 16 : 8, sampleBits: bits, colour: isGrey(own) && colour.icc?.toString('latin1', 16, 20) === 'GRAY' ? 'grey' : 'rgb',
    alpha: items.references('auxl').some(({ to }) => to.includes(primary)), progressive: true,
    // Phones and cameras write HEIC; anything may write AVIF.
    device: codec === 'hvc1' ? 'camera' : null,
    codedPixels: await codedPixels(window, items, parts), ...colour, notes: notesOf(items),
  }
}

function sidesOf(properties: Box[]): CodedSides {
  const ispe = properties.find(({ type, body }) => type === 'ispe' && body.length >= 12)?.body
  return ispe ? { width: ispe.readUInt32BE(4), height: ispe.readUInt32BE(8) } : { width: 0, height: 0 }
}

/** A phone's largest pictures have about 200 tiles; of more, these stand for the rest. */
const mostParts = 500

/** What the decoder will make: the sum of the coded parts, the grid's canvas, or the picture itself. */
async function codedPixels(window: FileWindow, items: HeifItems, parts: number[]): Promise<number> {
  const area = ({ width, height }: CodedSides) => width * height
  let pixels = 0
  for (const item of parts.length > 0 ? parts.slice(0, mostParts) : [items.primary]) pixels += area(await codedSides(window, items, item))
  if (parts.length > mostParts) pixels *= parts.length / mostParts
  return Math.max(pixels, area(await gridCanvas(window, items)))
}

async function codedSides(window: FileWindow, items: HeifItems, item: number): Promise<CodedSides> {
  const properties = items.propertiesOf(item)
  const box = (type: string) => properties.find(property => property.type === type)?.body
  const claimed = sidesOf(properties)
  const hvcC = box('hvcC')
  const said = hvcC ? sidesOfHevc(hvcC) : sidesOfAv1(await startOf(window, items, item, 256)) ?? sidesOfAv1(box('av1C')?.subarray(4) ?? Buffer.alloc(0))
  return said && said.width * said.height > claimed.width * claimed.height ? said : claimed
}

/** Output sides in a grid item's data (HEIF 6.6.2.3.2). */
async function gridCanvas(window: FileWindow, items: HeifItems): Promise<CodedSides> {
  if (items.typeOf(items.primary) !== 'grid') return { width: 0, height: 0 }
  const grid = await startOf(window, items, items.primary, 12)
  if (grid.length < 8) throw unreadable('its header makes no sense')
  return grid[1]! & 1 ? { width: grid.readUInt32BE(4), height: grid.readUInt32BE(8) } : { width: grid.readUInt16BE(4), height: grid.readUInt16BE(6) }
}

async function startOf(window: FileWindow, items: HeifItems, item: number, most: number): Promise<Buffer> {
  const place = items.placeOf(item)
  if (!place) return Buffer.alloc(0)
  const length = Math.min(most, place.length || most)
  return place.within === 'meta' ? items.own.subarray(place.offset, place.offset + length) : window.bytes(place.offset, length)
}

/** Bits a sample, by the codec's own configuration: hvcC (14496-15, 8.3.3.1.2) or av1C (AV1 in ISOBMFF, 2.3.3). */
function depthOf(codec: string, properties: Box[]): number {
  const configuration = properties.find(({ type }) => type === (codec === 'hvc1' ? 'hvcC' : 'av1C'))?.body
  if (!configuration) throw unreadable('its header makes no sense')
  if (codec === 'hvc1') return 8 + ((configuration[17] ?? 0) & 7)
  const flags = configuration[2] ?? 0
  return flags & 0x40 ? flags & 0x20 ? 12 : 10 : 8
}

const isGrey = (properties: Box[]): boolean => properties.some(({ type, body }) => type === 'pixi' && body[4] === 1)

/** colr (HEIF 6.5.5): an ICC profile goes before code points. */
function coloursOf(properties: Box[]): { icc: Buffer | null, codePoints?: CodePoints } {
  const kinds = properties.filter(({ type }) => type === 'colr').map(({ body }) => ({ kind: body.toString('latin1', 0, 4), body }))
  const profile = kinds.find(({ kind, body }) => ['prof', 'rICC'].includes(kind) && body.length <= profileMaxBytes)
  if (profile) return { icc: Buffer.from(profile.body.subarray(4)) }
  const nclx = kinds.find(({ kind }) => kind === 'nclx')?.body
  return nclx && nclx.length >= 8 ? { icc: null, codePoints: { primaries: nclx.readUInt16BE(4), transfer: nclx.readUInt16BE(6) } } : { icc: null }
}

/** A gain map stands as a picture derived by tone mapping (ISO 21496-1: `tmap`), or as a maker's auxiliary picture. */
function notesOf(items: HeifItems): PictureNote[] {
  const added = items.references('auxl').flatMap(({ from }) => items.propertiesOf(from))
  const hasGainMap = added.some(({ type, body }) => type === 'auxC' && /gainmap/i.test(body.toString('latin1')))
    || items.references('dimg').some(({ from }) => items.typeOf(from) === 'tmap')
  return hasGainMap ? ['gain_map'] : []
}
