import sharp, { type Sharp } from 'sharp'
import type { PictureHeader } from '../header/header'
import type { Codes } from './codes'
import { stretched } from './heic'

sharp.cache(false)
sharp.concurrency(Number(process.env.IMAGE_THREADS ?? 2))

/** Options for every reading of an upload: the pixel budget is ours, cut-off and broken data are errors, the first picture is the picture. */
export const inputOptions = { failOn: 'error', limitInputPixels: false, sequentialRead: true } as const

/** Samples as they are stored: an embedded profile is never applied here, since colours outside the library's output space would be clipped. */
export async function decodeWithSharp(path: string, header: PictureHeader): Promise<Codes> {
  const { data, info } = await asStored(sharp(path, { ...inputOptions, ignoreIcc: true }), header).toBuffer({ resolveWithObject: true })
  const { width, height, channels } = info
  if (header.bitDepth === 8) return { width, height, channels, codes: data }
  const codes = new Uint16Array(data.buffer, data.byteOffset, data.length / 2)
  // The library shifts 10 and 12 bits up to 16: white would stay just below white.
  const bits = header.sampleBits ?? 16
  return { width, height, channels, codes: bits < 16 ? stretched(codes, bits, 16 - bits) : codes }
}

function asStored(picture: Sharp, { colour, alpha, bitDepth, format }: PictureHeader): Sharp {
  if (colour === 'cmyk') return picture.pipelineColourspace('cmyk').toColourspace('cmyk').raw()
  // AVIF comes as three channels, grey or not.
  const grey = colour === 'grey' && format !== 'avif'
  if (bitDepth === 16) return picture.toColourspace(grey ? 'grey16' : 'rgb16').raw({ depth: 'ushort' })
  return picture.toColourspace(grey && !alpha ? 'b-w' : 'srgb').raw()
}

/** Inks without a usable profile: what the library holds for a common coated press, as 8-bit sRGB. */
export async function decodeInksWithoutProfile(path: string): Promise<Codes> {
  const { data, info } = await sharp(path, inputOptions).toColourspace('srgb').removeAlpha().raw().toBuffer({ resolveWithObject: true })
  return { width: info.width, height: info.height, channels: info.channels, codes: data }
}
