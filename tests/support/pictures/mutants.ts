import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import sharp from 'sharp'
import { seededRandom, type SeededRandom } from '../../../shared/calibration/random'

/** Small sound pictures, several ways of storing in each format; HEIC by heif-enc, the rest by sharp. */
export async function soundPictures(): Promise<Record<string, Buffer>> {
  const [width, height] = [96, 64]
  const pixels = Buffer.from(Array.from({ length: 3 * width * height }, (_, i) => (i * 7 + (i >> 6) * 13) & 255))
  const picture = () => sharp(pixels, { raw: { width, height, channels: 3 } }).withMetadata({ orientation: 6 })
  return {
    'baseline.jpg': await picture().jpeg().toBuffer(), 'progressive.jpg': await picture().jpeg({ progressive: true }).toBuffer(), 'inks.jpg': await picture().toColourspace('cmyk').jpeg().toBuffer(),
    'plain.png': await picture().withIccProfile('p3').png().toBuffer(), 'palette.png': await picture().png({ palette: true }).toBuffer(), 'deep.png': await picture().toColourspace('rgb16').png({ progressive: true }).toBuffer(),
    'strips.tif': await picture().tiff({ compression: 'lzw' }).toBuffer(), 'tiles.tif': await picture().tiff({ compression: 'deflate', tile: true, tileWidth: 32, tileHeight: 32 }).toBuffer(), 'jpeg.tif': await picture().tiff({ compression: 'jpeg' }).toBuffer(),
    'lossy.webp': await picture().webp().toBuffer(), 'lossless.webp': await picture().withIccProfile('p3').webp({ lossless: true }).toBuffer(),
    'plain.avif': await picture().avif({ effort: 0 }).toBuffer(), 'deep.avif': await picture().toColourspace('rgb16').avif({ effort: 0, bitdepth: 10 }).toBuffer(),
    'plain.heic': heic(await picture().png().toBuffer()),
  }
}

function heic(png: Buffer): Buffer {
  const folder = mkdtempSync(join(tmpdir(), 'emulside-heic-'))
  try {
    writeFileSync(join(folder, 'a.png'), png)
    execFileSync('heif-enc', ['-p', 'preset=ultrafast', '-o', join(folder, 'a.heic'), join(folder, 'a.png')], { stdio: 'ignore', timeout: 30_000 })
    return readFileSync(join(folder, 'a.heic'))
  }
  finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

/** The mutant of this seed: which picture it comes from turns with the seed. */
export function mutantOf(pictures: Record<string, Buffer>, seed: number): { name: string, bytes: Buffer } {
  const names = Object.keys(pictures)
  const name = names[seed % names.length]!
  const random = seededRandom(seed)
  let bytes: Buffer = Buffer.from(pictures[name]!)
  for (let changes = 1 + random.below(4); changes > 0 && bytes.length > 16; changes--) bytes = changed(bytes, random)
  return { name, bytes }
}

const numbers = [0, 1, 2, 0x7F, 0xFF, 0x7FFF, 0xFFFF, 0x10000, 0x7FFFFFFF, 0xFFFFFFFF]

/** One change: bytes, bits, a number of two or four bytes, a piece taken out, doubled, blanked or put in, or the end cut off. Headers are hit as often as data. */
function changed(bytes: Buffer, random: SeededRandom): Buffer {
  const at = random.below(random.below(2) === 0 ? Math.min(bytes.length, 400) : bytes.length)
  const length = 1 + random.below(40)
  const out = Buffer.from(bytes)
  switch (random.below(8)) {
    case 0: out[at] = random.below(256); return out
    case 1: out[at]! ^= 1 << random.below(8); return out
    case 2: if (at + 4 <= out.length) out.writeUInt32BE(numbers[random.below(numbers.length)]!, at); return out
    case 3: if (at + 4 <= out.length) out.writeUInt32LE(numbers[random.below(numbers.length)]!, at); return out
    case 4: return Buffer.concat([bytes.subarray(0, at), bytes.subarray(at + length)])
    case 5: return Buffer.concat([bytes.subarray(0, at + length), bytes.subarray(at)])
    case 6: return Buffer.from(out.fill(random.below(2) * 255, at, Math.min(out.length, at + length)))
    default: return bytes.subarray(0, Math.max(1, at))
  }
}
