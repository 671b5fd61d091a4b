/**
 * Orientation from an Exif block that starts with its TIFF header (Exif 2.32, tag 274 in IFD 0).
 * Anything malformed counts as upright: pictures with broken Exif are common and otherwise sound.
 */
export function readOrientationTag(exif: Buffer): number {
  if (exif.length < 14) return 1
  const byteOrder = exif.toString('latin1', 0, 2)
  if (byteOrder !== 'II' && byteOrder !== 'MM') return 1
  const little = byteOrder === 'II'
  const u16 = (at: number) => little ? exif.readUInt16LE(at) : exif.readUInt16BE(at)
  const directory = little ? exif.readUInt32LE(4) : exif.readUInt32BE(4)
  if (directory + 2 > exif.length) return 1
  const entries = u16(directory)
  for (let i = 0; i < entries; i++) {
    const entry = directory + 2 + 12 * i
    if (entry + 12 > exif.length) return 1
    if (u16(entry) !== 274) continue
    const value = u16(entry + 8)
    return value >= 1 && value <= 8 ? value : 1
  }
  return 1
}
