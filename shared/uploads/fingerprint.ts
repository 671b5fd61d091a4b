const sliceBytes = 65_536
const mostSlices = 16

/**
 * Where a file of so many bytes is looked at to know it again: at most 16 slices of 64 kB, the first and the last among
 * them, the others evenly between. `end` is exclusive. A file of up to 1 MiB is looked at whole.
 */
export function fingerprintSlices(bytes: number): { start: number, end: number }[] {
  if (bytes <= sliceBytes * mostSlices) return [{ start: 0, end: bytes }]
  return Array.from({ length: mostSlices }, (_, i) => {
    const start = Math.floor(i * (bytes - sliceBytes) / (mostSlices - 1))
    return { start, end: start + sliceBytes }
  })
}

const crcTable = Uint32Array.from({ length: 256 }, (_, byte) => {
  let code = byte
  for (let bit = 0; bit < 8; bit++) code = code & 1 ? 0xEDB88320 ^ (code >>> 1) : code >>> 1
  return code
})

/**
 * CRC-32 (ISO 3309; ITU-T V.42, 8.1.1.6.2) of the slices one after the other, as 8 hexadecimal digits. It tells files
 * apart that were mixed up; it does not protect against somebody who means to deceive.
 */
export function fingerprintOf(slices: Iterable<Uint8Array>): string {
  let code = 0xFFFFFFFF
  for (const slice of slices) for (const byte of slice) code = crcTable[(code ^ byte) & 0xFF]! ^ (code >>> 8)
  return ((code ^ 0xFFFFFFFF) >>> 0).toString(16).padStart(8, '0')
}
