import { Bits } from './bits'

/** What coded data says of itself, whatever the boxes around it claim. */
export interface CodedSides { width: number, height: number }

/** From a hvcC box (ISO/IEC 14496-15, 8.3.3.1): its first sequence parameter set; null where there is none. */
export function sidesOfHevc(hvcC: Buffer): CodedSides | null {
  const spsType = 33
  let at = 23
  for (let array = 0; array < (hvcC[22] ?? 0) && at + 3 <= hvcC.length; array++) {
    const type = hvcC[at]! & 0x3F, units = hvcC.readUInt16BE(at + 1)
    at += 3
    for (let unit = 0; unit < units && at + 2 <= hvcC.length; unit++) {
      const length = hvcC.readUInt16BE(at)
      if (type === spsType) return readSequenceParameters(hvcC.subarray(at + 2, at + 2 + length))
      at += 2 + length
    }
  }
  return null
}

/** ITU-T H.265, 7.3.2.2.1 down to the sides. */
function readSequenceParameters(unit: Buffer): CodedSides {
  const bits = new Bits(withoutEmulation(unit.subarray(2)))
  bits.skip(4)
  const subLayers = bits.read(3)
  bits.skip(1 + 96) // temporal nesting; general profile, tier and level (7.3.3)
  const present = Array.from({ length: subLayers }, () => [bits.read(1), bits.read(1)] as const)
  if (subLayers > 0) bits.skip(2 * (8 - subLayers))
  for (const [profile, level] of present) bits.skip(88 * profile + 8 * level)
  bits.exponential()
  if (bits.exponential() === 3) bits.skip(1)
  return { width: bits.exponential(), height: bits.exponential() }
}

/** Takes out the 03 of 00 00 03 (7.4.2). */
function withoutEmulation(bytes: Uint8Array): Uint8Array {
  return bytes.filter((byte, i) => !(byte === 3 && i >= 2 && bytes[i - 1] === 0 && bytes[i - 2] === 0))
}

/** From the first bytes of AV1 data (AV1 bitstream specification, 5.3 and 5.5): its sequence header; null where none comes early. */
export function sidesOfAv1(data: Buffer): CodedSides | null {
  const sequenceHeader = 1
  for (let at = 0; at < data.length;) {
    const head = data[at]!, type = head >> 3 & 15
    at += head & 4 ? 2 : 1
    let length = data.length - at
    if (head & 2) {
      length = 0
      for (let i = 0; i < 8 && at < data.length; i++) {
        const byte = data[at++]!
        length += (byte & 0x7F) * 2 ** (7 * i)
        if (byte < 0x80) break
      }
    }
    if (type === sequenceHeader) return readSequenceHeader(data.subarray(at, at + length))
    at += length
  }
  return null
}

function readSequenceHeader(payload: Buffer): CodedSides {
  const bits = new Bits(payload)
  bits.skip(4)
  if (bits.read(1) === 1) bits.skip(5)
  else skipOperatingPoints(bits)
  const widthBits = bits.read(4) + 1, heightBits = bits.read(4) + 1
  return { width: bits.read(widthBits) + 1, height: bits.read(heightBits) + 1 }
}

function skipOperatingPoints(bits: Bits): void {
  let delayBits = 0, hasModel = false
  if (bits.read(1) === 1) {
    bits.skip(64)
    if (bits.read(1) === 1) bits.exponential()
    hasModel = bits.read(1) === 1
    if (hasModel) {
      delayBits = bits.read(5) + 1
      bits.skip(32 + 5 + 5)
    }
  }
  const hasDelays = bits.read(1) === 1
  const points = bits.read(5) + 1
  for (let i = 0; i < points; i++) {
    bits.skip(12)
    if (bits.read(5) > 7) bits.skip(1)
    if (hasModel && bits.read(1) === 1) bits.skip(2 * delayBits + 1)
    if (hasDelays && bits.read(1) === 1) bits.skip(4)
  }
}
