/** PNG filter type 1, each byte less the one of the pixel to its left (ISO/IEC 15948, 9.2). Writes the type byte first. */
export function subtractLeft(row: Uint8Array, bytesPerPixel: number, to: Buffer, at: number): void {
  to[at] = 1
  for (let i = 0; i < bytesPerPixel; i++) to[at + 1 + i] = row[i]!
  for (let i = bytesPerPixel; i < row.length; i++) to[at + 1 + i] = row[i]! - row[i - bytesPerPixel]!
}
