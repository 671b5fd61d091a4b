import { randomBytes } from 'node:crypto'
import sharp from 'sharp'

/** A picture whose bytes nobody has uploaded before: smooth tones with a little noise. */
export async function newPicture({ width = 480, height = 320, format = 'jpeg', orientation }: { width?: number, height?: number, format?: 'jpeg' | 'png', orientation?: number } = {}): Promise<Buffer> {
  const noise = randomBytes(width * height)
  const pixels = Buffer.alloc(3 * width * height)
  for (let i = 0; i < width * height; i++) {
    const [x, y] = [i % width, Math.floor(i / width)]
    pixels[3 * i] = 40 + 170 * x / width + noise[i]! % 12
    pixels[3 * i + 1] = 40 + 170 * y / height + noise[i]! % 12
    pixels[3 * i + 2] = 128 + noise[i]! % 12
  }
  const picture = sharp(pixels, { raw: { width, height, channels: 3 } })
  if (format === 'png') return picture.png().toBuffer()
  return (orientation ? picture.withMetadata({ orientation }) : picture).jpeg({ quality: 88 }).toBuffer()
}

/** The multipart body of an upload: `[file name, bytes]` each, under the field `file` unless another is named. */
export function uploadForm(files: [name: string, bytes: Uint8Array][], field = 'file'): FormData {
  const form = new FormData()
  for (const [name, bytes] of files) form.append(field, new Blob([new Uint8Array(bytes)]), name)
  return form
}
