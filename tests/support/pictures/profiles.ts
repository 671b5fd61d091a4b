import Color from 'colorjs.io'

/**
 * Small ICC profiles (version 2 layout, ICC.1:2022 clause 7) made from colour spaces that colorjs.io knows: its matrices are the
 * independent source of the primaries, already adapted to D50.
 */
export function matrixProfile(space: 'p3' | 'a98rgb' | 'srgb' | 'rec2020', curve: Buffer, name = `Test ${space}`): Buffer {
  const xyz = (rgb: [number, number, number]) => xyzTag(new Color(space, rgb).to('xyz-d50').coords as [number, number, number])
  return profile('RGB ', [
    ['desc', description(name)], ['rXYZ', xyz([1, 0, 0])], ['gXYZ', xyz([0, 1, 0])], ['bXYZ', xyz([0, 0, 1])],
    ['rTRC', curve], ['gTRC', curve], ['bTRC', curve],
  ])
}

export const greyProfile = (curve: Buffer, name = 'Test grey'): Buffer => profile('GRAY', [['desc', description(name)], ['kTRC', curve]])

/** IEC 61966-2-1 as parametric curve type 3. */
export const srgbCurve = () => parametric(3, [2.4, 1 / 1.055, 0.055 / 1.055, 1 / 12.92, 0.04045])
/** Adobe RGB (1998) 4.3.4.2: 2 51/256. */
export const adobeCurve = () => gamma(563 / 256)

export function gamma(exponent: number): Buffer {
  const tag = curveHead(1, 2)
  tag.writeUInt16BE(Math.round(exponent * 256), 12)
  return tag
}

export function sampled(values: number[]): Buffer {
  const tag = curveHead(values.length, 2 * values.length)
  values.forEach((value, i) => tag.writeUInt16BE(Math.round(value * 65535), 12 + 2 * i))
  return tag
}

function curveHead(count: number, bytes: number): Buffer {
  const tag = Buffer.alloc(12 + bytes)
  tag.write('curv', 'latin1')
  tag.writeUInt32BE(count, 8)
  return tag
}

export function parametric(type: number, values: number[]): Buffer {
  const tag = Buffer.alloc(12 + 4 * values.length)
  tag.write('para', 'latin1')
  tag.writeUInt16BE(type, 8)
  values.forEach((value, i) => tag.writeInt32BE(Math.round(value * 65536), 12 + 4 * i))
  return tag
}

function xyzTag(values: [number, number, number]): Buffer {
  const tag = Buffer.alloc(20)
  tag.write('XYZ ', 'latin1')
  values.forEach((value, i) => tag.writeInt32BE(Math.round(value * 65536), 8 + 4 * i))
  return tag
}

function description(name: string): Buffer {
  const tag = Buffer.alloc(12 + name.length + 1 + 78)
  tag.write('desc', 'latin1')
  tag.writeUInt32BE(name.length + 1, 8)
  tag.write(name, 12, 'latin1')
  return tag
}

function profile(colourSpace: string, tags: [string, Buffer][]): Buffer {
  const head = Buffer.alloc(128 + 4 + 12 * tags.length)
  head.writeUInt32BE(0x02400000, 8)
  head.write(`mntr${colourSpace}XYZ `, 12, 'latin1')
  head.write('acsp', 36, 'latin1')
  ;[0.9642, 1, 0.8249].forEach((value, i) => head.writeInt32BE(Math.round(value * 65536), 68 + 4 * i))
  head.writeUInt32BE(tags.length, 128)
  let offset = head.length
  const bodies = tags.map(([signature, body], i) => {
    head.write(signature, 132 + 12 * i, 'latin1')
    head.writeUInt32BE(offset, 136 + 12 * i)
    head.writeUInt32BE(body.length, 140 + 12 * i)
    const padded = Buffer.concat([body, Buffer.alloc((4 - body.length % 4) % 4)])
    offset += padded.length
    return padded
  })
  const whole = Buffer.concat([head, ...bodies])
  whole.writeUInt32BE(whole.length, 0)
  return whole
}
