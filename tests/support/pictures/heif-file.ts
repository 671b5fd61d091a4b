/** Reads the one coded picture of a file by heif-enc, and writes HEIF files (ISO/IEC 23008-12) around it: grids, turns, false claims. */
interface Box { type: string, body: Buffer }

export function box(type: string, ...parts: (Buffer | number[])[]): Buffer {
  const body = Buffer.concat(parts.map(part => Buffer.from(part)))
  const head = Buffer.alloc(8)
  head.writeUInt32BE(8 + body.length)
  head.write(type, 4, 'latin1')
  return Buffer.concat([head, body])
}

const u16 = (...values: number[]) => Buffer.from(values.flatMap(v => [v >> 8 & 255, v & 255]))
const u32 = (...values: number[]) => Buffer.concat(values.map((v) => {
  const bytes = Buffer.alloc(4)
  bytes.writeUInt32BE(v)
  return bytes
}))

function boxesOf(bytes: Buffer): Box[] {
  const boxes: Box[] = []
  for (let at = 0; at + 8 <= bytes.length;) {
    const size = bytes.readUInt32BE(at) || bytes.length - at
    boxes.push({ type: bytes.toString('latin1', at + 4, at + 8), body: bytes.subarray(at + 8, at + size) })
    at += size
  }
  return boxes
}
const find = (boxes: Box[], type: string) => boxes.find(b => b.type === type)!.body

export interface CodedPicture { type: 'hvc1' | 'av01', configuration: Buffer, bits: Buffer, width: number, height: number }

/** Of a file with one picture and no alpha. */
export function codedPictureOf(file: Buffer): CodedPicture {
  const meta = boxesOf(find(boxesOf(file), 'meta').subarray(4))
  const properties = boxesOf(find(boxesOf(find(meta, 'iprp')), 'ipco'))
  const configuration = properties.find(p => p.type === 'hvcC' || p.type === 'av1C')!
  const ispe = find(properties, 'ispe')
  return {
    type: configuration.type === 'hvcC' ? 'hvc1' : 'av01', configuration: box(configuration.type, configuration.body),
    bits: find(boxesOf(file), 'mdat'), width: ispe.readUInt32BE(4), height: ispe.readUInt32BE(8),
  }
}

export interface HeifFile {
  tile: CodedPicture
  /** a grid of the same tile; one picture without */
  grid?: { rows: number, columns: number, /** of the canvas, where another than the tiles' is claimed */ width?: number, height?: number, /** in ispe */ claimed?: [number, number] }
  /** sides that ispe claims for the coded picture */
  claimed?: [number, number]
  /** quarter turns against the clock (irot), then mirroring about an axis (imir): 0 vertical, 1 horizontal */
  quarterTurns?: number
  mirrorAxis?: 0 | 1
  /** primaries and transfer of H.273 */
  codePoints?: [number, number]
}

export function heifFile({ tile, grid, claimed = [tile.width, tile.height], quarterTurns, mirrorAxis, codePoints }: HeifFile): Buffer {
  const tiles = grid ? grid.rows * grid.columns : 1
  const own = [
    ...quarterTurns === undefined ? [] : [box('irot', [quarterTurns])], ...mirrorAxis === undefined ? [] : [box('imir', [mirrorAxis])],
    ...codePoints ? [box('colr', Buffer.from('nclx'), u16(...codePoints, 6), [0x80])] : [],
  ]
  const canvas = grid && { width: grid.width ?? grid.columns * tile.width, height: grid.height ?? grid.rows * tile.height }
  const ispe = (sides: readonly number[]) => box('ispe', u32(0, sides[0]!, sides[1]!))
  const properties = [ispe(claimed), tile.configuration, ...canvas ? [ispe(grid.claimed ?? [canvas.width, canvas.height])] : [], ...own]
  const ownIndices = own.map((_, i) => properties.length - own.length + 1 + i)
  const primary = grid ? tiles + 1 : 1
  const associations = [
    ...Array.from({ length: tiles }, (_, i) => ({ id: i + 1, indices: [1, 2 | 0x80, ...grid ? [] : ownIndices] })),
    ...grid ? [{ id: primary, indices: [3, ...ownIndices] }] : [],
  ]
  const gridBody = canvas && Buffer.concat([Buffer.from([0, 1, (grid.rows - 1) & 255, (grid.columns - 1) & 255]), u32(canvas.width, canvas.height)])
  const items = [...Array.from({ length: tiles }, (_, i) => [i + 1, tile.type] as const), ...grid ? [[primary, 'grid'] as const] : []]
  const metaAt = (offset: number) => box('meta', u32(0),
    box('hdlr', u32(0, 0), Buffer.from('pict'), u32(0, 0, 0), [0]),
    box('pitm', u32(0), u16(primary)),
    box('iinf', u32(0), u16(items.length), ...items.map(([id, type]) => // Tiles are hidden (flag 1): only their grid is a picture.
      box('infe', u32(grid && type !== 'grid' ? 0x02000001 : 0x02000000), u16(id, 0), Buffer.from(type), [0]))),
    ...grid ? [box('iref', u32(0), box('dimg', u16(primary, tiles), u16(...Array.from({ length: tiles }, (_, i) => i + 1))))] : [],
    box('iprp', box('ipco', ...properties), box('ipma', u32(0, associations.length), ...associations.map(({ id, indices }) => Buffer.concat([u16(id), Buffer.from([indices.length, ...indices])])))),
    ...gridBody ? [box('idat', gridBody)] : [],
    box('iloc', u32(0x01000000), [0x44, 0x00], u16(items.length), ...items.map(([id, type]) => type === 'grid'
      ? Buffer.concat([u16(id, 1, 0, 1), u32(0, gridBody!.length)])
      : Buffer.concat([u16(id, 0, 0, 1), u32(offset, tile.bits.length)]))))
  const ftyp = tile.type === 'hvc1' ? box('ftyp', Buffer.from('heic'), u32(0), Buffer.from('mif1heic')) : box('ftyp', Buffer.from('avif'), u32(0), Buffer.from('mif1avif'))
  const offset = ftyp.length + metaAt(0).length + 8
  return Buffer.concat([ftyp, metaAt(offset), box('mdat', tile.bits)])
}
