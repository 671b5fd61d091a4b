import { readFile } from 'node:fs/promises'
import { createRequire } from 'node:module'
import { unreadable } from '../header/header'
import type { Codes } from './codes'

/** The part of libheif's interface that is used here; its own types end at the bare WebAssembly. */
interface Answered { code?: unknown }
interface Channel { id: unknown, width: number, height: number, stride: number, data: Uint8Array }
interface Libheif {
  heif_error_code: { heif_error_Ok: unknown }
  heif_colorspace: { heif_colorspace_RGB: unknown }
  heif_chroma: Record<'heif_chroma_interleaved_RGB' | 'heif_chroma_interleaved_RGBA' | 'heif_chroma_interleaved_RRGGBB_LE' | 'heif_chroma_interleaved_RRGGBBAA_LE', unknown>
  heif_channel: { heif_channel_interleaved: unknown }
  heif_context_alloc: () => unknown
  heif_context_free: (context: unknown) => void
  heif_context_read_from_memory: (context: unknown, file: Uint8Array) => { code: unknown }
  heif_js_context_get_primary_image_handle: (context: unknown) => unknown
  heif_js_decode_image2: (handle: unknown, colours: unknown, chroma: unknown) => Promise<{ channels: Channel[], image: unknown } & Answered> | ({ channels: Channel[], image: unknown } & Answered)
  heif_image_release: (image: unknown) => void
  heif_image_handle_release: (handle: unknown) => void
}

const requireHere = createRequire(import.meta.url)

/**
 * The primary picture of a HEIC file, turned as the file says; 8 bits, or stretched to 16 where there are more.
 * Synchronous and slow: it runs for seconds without letting go.
 */
export async function decodeHeic(path: string, { alpha, sampleBits }: { alpha: boolean, sampleBits: number }): Promise<Codes> {
  // A fresh instance a picture: WebAssembly memory grows and is only given back with its instance.
  const libheif = (requireHere('libheif-js/libheif-wasm/libheif-bundle.js') as () => Libheif)()
  const context = libheif.heif_context_alloc()
  const read = libheif.heif_context_read_from_memory(context, await readFile(path))
  if (read.code !== libheif.heif_error_code.heif_error_Ok) throw unreadable('its data is broken or cut off')
  const handle = libheif.heif_js_context_get_primary_image_handle(context)
  if (!handle || (handle as Answered).code) throw unreadable('there is no picture in it')
  const chroma = libheif.heif_chroma[`heif_chroma_interleaved_${sampleBits > 8 ? alpha ? 'RRGGBBAA_LE' : 'RRGGBB_LE' : alpha ? 'RGBA' : 'RGB'}`]
  const made = await libheif.heif_js_decode_image2(handle, libheif.heif_colorspace.heif_colorspace_RGB, chroma)
  const plane = made?.code ? undefined : made?.channels?.find(({ id }) => id === libheif.heif_channel.heif_channel_interleaved)
  if (!plane) throw unreadable('its data is broken or cut off')
  const channels = alpha ? 4 : 3
  const bytes = unpadded(plane, channels * (sampleBits > 8 ? 2 : 1))
  libheif.heif_image_release(made.image)
  libheif.heif_image_handle_release(handle)
  libheif.heif_context_free(context)
  const { width, height } = plane
  return { width, height, channels, codes: sampleBits > 8 ? stretched(new Uint16Array(bytes.buffer), sampleBits) : bytes }
}

/** A copy outside the decoder's memory, row after row without a gap. */
function unpadded({ width, height, stride, data }: Channel, bytesPerPixel: number): Uint8Array<ArrayBuffer> {
  const line = width * bytesPerPixel
  const bytes = new Uint8Array(line * height)
  for (let y = 0; y < height; y++) bytes.set(data.subarray(y * stride, y * stride + line), y * line)
  return bytes
}

/** 10 or 12 bits to 16, so that full white is full white. */
export function stretched(codes: Uint16Array, bits: number, shift = 0): Uint16Array {
  const greatest = 2 ** bits - 1
  const table = Uint16Array.from({ length: greatest + 1 }, (_, code) => Math.round(65535 * code / greatest))
  for (let i = 0; i < codes.length; i++) codes[i] = table[codes[i]! >> shift & greatest]!
  return codes
}
