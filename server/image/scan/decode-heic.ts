import { readFile } from 'node:fs/promises'
import { createRequire } from 'node:module'
import { unreadable } from '../header/header'

/** The part of libheif's interface that is used here; its own types end at the bare WebAssembly. */
interface HeifImage { is_primary(): boolean, get_width(): number, get_height(): number, free(): void, display(target: PixelTarget, done: (filled: PixelTarget | null) => void): void }
interface PixelTarget { data: Uint8ClampedArray<ArrayBuffer>, width: number, height: number }
interface Libheif { HeifDecoder: new () => { decode(file: Uint8Array): HeifImage[] } }

const requireHere = createRequire(import.meta.url)

/** Pixels of a HEIC file's primary picture, turned as the file says, four channels of 8 bits. */
export async function decodeHeic(path: string): Promise<{ width: number, height: number, codes: Uint8ClampedArray<ArrayBuffer> }> {
  // A fresh instance a picture: WebAssembly memory grows and is never given back otherwise.
  const libheif = (requireHere('libheif-js/libheif-wasm/libheif-bundle.js') as () => Libheif)()
  const images = new libheif.HeifDecoder().decode(await readFile(path))
  const image = images.find(image => image.is_primary()) ?? images[0]
  if (!image) throw unreadable('there is no picture in it')
  const [width, height] = [image.get_width(), image.get_height()]
  const target: PixelTarget = { data: new Uint8ClampedArray(4 * width * height), width, height }
  const filled = await new Promise<PixelTarget | null>(resolve => image.display(target, resolve))
  for (const held of images) held.free()
  if (!filled) throw unreadable('its data is broken or cut off')
  return { width, height, codes: filled.data }
}
