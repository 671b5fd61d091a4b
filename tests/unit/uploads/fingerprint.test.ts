import { randomBytes } from 'node:crypto'
import { crc32 } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { fingerprintOf, fingerprintSlices } from '#shared/uploads/fingerprint'

describe('the fingerprint of a file', () => {
  it('is CRC-32 as zlib computes it, and as its published check value says', () => {
    // Check value of CRC-32/ISO-HDLC for the ASCII digits 1 to 9: cbf43926 (the catalogue’s “check”).
    expect(fingerprintOf([Buffer.from('123456789')])).toBe('cbf43926')
    for (const length of [0, 1, 1000, 70_000]) {
      const bytes = randomBytes(length)
      expect(fingerprintOf([bytes.subarray(0, length >> 1), bytes.subarray(length >> 1)])).toBe(crc32(bytes).toString(16).padStart(8, '0'))
    }
  })

  it('looks at the first and the last bytes and at places between, never beyond the file', () => {
    for (const bytes of [1_048_577, 3_000_000, 999_999_999]) {
      const slices = fingerprintSlices(bytes)
      expect(slices).toHaveLength(16)
      expect([slices[0]!.start, slices.at(-1)!.end]).toEqual([0, bytes])
      for (const [i, { start, end }] of slices.entries()) {
        expect(end - start).toBe(65_536)
        if (i > 0) expect(start).toBeGreaterThan(slices[i - 1]!.start)
      }
    }
  })

  it('looks at a small file whole', () => {
    for (const bytes of [0, 5, 1_048_576]) expect(fingerprintSlices(bytes)).toEqual([{ start: 0, end: bytes }])
  })
})
