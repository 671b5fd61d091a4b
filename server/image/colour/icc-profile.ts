import { luminanceFromLightness } from '#shared/tone/lightness'
import type { Vector3 } from '#shared/tone/matrix'
import { readCurve, s15Fixed16, type ToneCurve } from './icc-curve'
import { readTable, type TableModel } from './icc-table'

/** A colour profile: a matrix and curves, one grey curve, a table of measured colours, or `other` for what is not understood. */
export type Profile = { description: string } & (
  | { kind: 'rgb', /** XYZ (D50) of the three full channels */ columns: [Vector3, Vector3, Vector3], curves: [ToneCurve, ToneCurve, ToneCurve] }
  | { kind: 'grey', curve: ToneCurve }
  | { kind: 'table', device: 'rgb' | 'cmyk', /** D50 XYZ of device values */ model: TableModel }
  | { kind: 'other' }
)

function readXyz(tag: Buffer): Vector3 {
  if (tag.toString('latin1', 0, 4) !== 'XYZ ') throw new RangeError('not an XYZ tag')
  return [s15Fixed16(tag, 8), s15Fixed16(tag, 12), s15Fixed16(tag, 16)]
}

/** Description: version 2 `desc` (ASCII) or version 4 `mluc` (UTF-16, the first language). */
function readDescription(tag: Buffer | undefined): string {
  if (!tag) return ''
  const type = tag.toString('latin1', 0, 4)
  if (type === 'desc') return tag.toString('latin1', 12, 12 + tag.readUInt32BE(8)).replace(/\0.*$/s, '').trim()
  if (type !== 'mluc' || tag.readUInt32BE(8) === 0) return ''
  const length = tag.readUInt32BE(20) & ~1, offset = tag.readUInt32BE(24)
  return Buffer.from(tag.subarray(offset, offset + length)).swap16().toString('utf16le').replace(/\0.*$/s, '').trim()
}

/** The tag table (7.3) as a look-up; a tag that reaches beyond the profile is left out. */
function tagsOf(icc: Buffer): Map<string, Buffer> {
  const count = Math.min(icc.readUInt32BE(128), 200)
  const tags = new Map<string, Buffer>()
  for (let i = 0; i < count; i++) {
    const entry = 132 + 12 * i
    const offset = icc.readUInt32BE(entry + 4), size = icc.readUInt32BE(entry + 8)
    if (offset + size <= icc.length) tags.set(icc.toString('latin1', entry, entry + 4), icc.subarray(offset, offset + size))
  }
  return tags
}

function readModel(icc: Buffer, tags: Map<string, Buffer>) {
  const need = (signature: string) => {
    const tag = tags.get(signature)
    if (!tag) throw new RangeError(`no ${signature} tag`)
    return tag
  }
  const colourSpace = icc.toString('latin1', 16, 20), connection = icc.toString('latin1', 20, 24)
  if (colourSpace === 'GRAY') {
    const curve = readCurve(need('kTRC'))
    // With a Lab connection space the curve gives lightness, with XYZ it gives luminance.
    return { kind: 'grey' as const, curve: connection === 'Lab ' ? (x: number) => luminanceFromLightness(100 * curve(x)) : curve }
  }
  const device = ({ 'RGB ': 'rgb', 'CMYK': 'cmyk' } as const)[colourSpace]
  if (!device) return { kind: 'other' as const }
  if (device === 'cmyk' || connection !== 'XYZ ' || !tags.has('rTRC')) return { kind: 'table' as const, device, model: readTable(need('A2B0'), connection, device === 'rgb' ? 3 : 4) }
  const each = <T>(names: string[], read: (tag: Buffer) => T) => names.map(name => read(need(name))) as [T, T, T]
  return { kind: 'rgb' as const, columns: each(['rXYZ', 'gXYZ', 'bXYZ'], readXyz), curves: each(['rTRC', 'gTRC', 'bTRC'], readCurve) }
}

/**
 * Reads an ICC profile (ICC.1:2022, versions 2 and 4). Null when the bytes are no profile at all;
 * `other` where it rests on look-up tables or another colour space.
 */
export function readProfile(icc: Buffer): Profile | null {
  if (icc.length < 132 || icc.toString('latin1', 36, 40) !== 'acsp') return null
  try {
    const tags = tagsOf(icc)
    const description = readDescription(tags.get('desc')).slice(0, 120) || 'embedded profile without a name'
    try {
      return { description, ...readModel(icc, tags) }
    }
    catch (error) {
      if (error instanceof RangeError) return { description, kind: 'other' }
      throw error
    }
  }
  catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
}
