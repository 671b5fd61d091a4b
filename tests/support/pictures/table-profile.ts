/**
 * A small CMYK or RGB profile that describes its device by a table of colours (ICC.1:2022, lut16Type 10.10, version 2), made up of
 * overlapping inks: no press of the world, but one that goes beyond sRGB in cyan.
 */
export function tableProfile(device: 'CMYK' | 'RGB ', points: number, labOf: (values: number[]) => [number, number, number]): Buffer {
  const channels = device === 'CMYK' ? 4 : 3
  const table = Buffer.alloc(52 + 2 * (2 * channels + 3 * points ** channels + 6))
  table.write('mft2', 'latin1')
  table.set([channels, 3, points], 8)
  for (const i of [0, 4, 8]) table.writeInt32BE(65536, 12 + 4 * i)
  table.writeUInt16BE(2, 48)
  table.writeUInt16BE(2, 50)
  let at = 52
  const put = (value: number) => { at = table.writeUInt16BE(Math.max(0, Math.min(65535, Math.round(value))), at) }
  const straight = () => { put(0); put(65535) }
  for (let i = 0; i < channels; i++) straight()
  for (let node = 0; node < points ** channels; node++) {
    const values = Array.from({ length: channels }, (_, i) => Math.floor(node / points ** (channels - 1 - i)) % points / (points - 1))
    const [l, a, b] = labOf(values)
    put(652.8 * l)
    put(256 * (a + 128))
    put(256 * (b + 128))
  }
  for (let i = 0; i < 3; i++) straight()
  const description = Buffer.concat([Buffer.from('desc\0\0\0\0\0\0\0\x0bRope inks\0\0', 'latin1'), Buffer.alloc(80)])
  const white = Buffer.alloc(20)
  white.write('XYZ ', 'latin1')
  ;[0.9642, 1, 0.8249].forEach((v, i) => white.writeInt32BE(Math.round(65536 * v), 8 + 4 * i))
  return withHeader(device, [['desc', description], ['wtpt', white], ['A2B0', table]])
}

function withHeader(device: string, tags: [string, Buffer][]): Buffer {
  const padded = tags.map(([, body]) => Buffer.concat([body, Buffer.alloc((4 - body.length % 4) % 4)]))
  const head = Buffer.alloc(132 + 12 * tags.length)
  head.writeUInt32BE(head.length + padded.reduce((sum, body) => sum + body.length, 0), 0)
  head.writeUInt32BE(0x02400000, 8)
  head.write(`${device === 'CMYK' ? 'prtr' : 'scnr'}${device}Lab `, 12, 'latin1')
  head.write('acsp', 36, 'latin1')
  ;[0.9642, 1, 0.8249].forEach((v, i) => head.writeInt32BE(Math.round(65536 * v), 68 + 4 * i))
  head.writeUInt32BE(tags.length, 128)
  let offset = head.length
  tags.forEach(([name, body], i) => {
    head.write(name, 132 + 12 * i, 'latin1')
    head.writeUInt32BE(offset, 136 + 12 * i)
    head.writeUInt32BE(body.length, 140 + 12 * i)
    offset += padded[i]!.length
  })
  return Buffer.concat([head, ...padded])
}

/** L*a*b* of four inks that absorb one after the other; cyan alone lies far beyond sRGB. */
export function labOfInks([cyan = 0, magenta = 0, yellow = 0, black = 0]: number[]): [number, number, number] {
  const light = (1 - 0.42 * cyan) * (1 - 0.5 * magenta) * (1 - 0.08 * yellow) * (1 - 0.85 * black)
  const dim = 1 - 0.9 * black
  return [95 * light, dim * (-58 * cyan + 72 * magenta - 4 * yellow), dim * (-52 * cyan - 6 * magenta + 90 * yellow)]
}
