import type { ComputeError } from '#shared/errors'
import { greatestCode, linearFromCode } from '#shared/tone/working-space'
import { lightOfCodePoints } from '../colour/code-points'
import { type Profile, readProfile } from '../colour/icc-profile'
import { srgbGreyLight, srgbLight, type WorkingLight, workingLightOf } from '../colour/working-light'
import { requireWithinBudget } from '../header/budget'
import { type PictureHeader, unreadable } from '../header/header'
import { readPictureHeader } from '../header/read-header'
import type { PictureSource } from '../protocol'
import type { Codes } from './codes'
import { decodeHeic } from './heic'
import { throughTable } from './through-table'
import { decodeInksWithoutProfile, decodeWithSharp } from './with-sharp'
import { readWorkingFile, writeWorkingFile } from './working-file'

/** A decoded picture as it is stored: not yet turned upright, interleaved, and what its codes mean. */
export interface StoredPicture extends Codes {
  header: PictureHeader
  light: WorkingLight
}

type TableProfile = Extract<Profile, { kind: 'table' }>

/** Codes that are L*-coded channels of the working space already. */
const toLinear = (code: number): number => linearFromCode(greatestCode * code)
const workingCodes: WorkingLight = { curves: [toLinear, toLinear, toLinear], matrix: [[1, 0, 0], [0, 1, 0], [0, 0, 1]] }

/** How the stored codes become light: by the profile if it fits the picture, by code points, or as sRGB. */
export function colourOf(header: PictureHeader): { light: WorkingLight, table?: TableProfile } {
  const profile = header.icc && readProfile(header.icc)
  if (profile?.kind === 'table' && profile.device === header.colour) return { light: workingCodes, table: profile }
  if (header.colour === 'cmyk') return { light: srgbLight }
  if (header.codePoints) return { light: lightOfCodePoints(header.codePoints, header.colour) }
  if (profile && profile.kind === header.colour) return { light: workingLightOf(profile) }
  const light = header.colour === 'grey' ? srgbGreyLight : srgbLight
  const { exponent } = header
  return { light: exponent ? { ...light, curves: light.curves.map(() => x => x ** exponent) } : light }
}

/** Seconds for a large picture, so that its codes are kept between calls: coded like a video's frame, or through a profile's table. */
export const isSlow = (header: PictureHeader, table?: TableProfile): boolean => header.format === 'heic' || header.format === 'avif' || table !== undefined

/**
 * The one way from a file to its picture: header, budget, then the pixels. Throws `not_an_image`, `image_unreadable` or
 * `picture_too_large`, the latter before anything is decoded.
 */
export async function decodePicture({ path, working }: PictureSource): Promise<StoredPicture> {
  const header = await readPictureHeader(path)
  requireWithinBudget(header)
  const { light, table } = colourOf(header)
  const kept = working && isSlow(header, table) ? await readWorkingFile(working) : null
  if (kept) return { header, light, ...kept }
  const codes = await orUnreadable(decodeCodes(path, header, table))
  if (working && isSlow(header, table)) await writeWorkingFile(working, codes)
  return { header, light, ...codes }
}

async function decodeCodes(path: string, header: PictureHeader, table?: TableProfile): Promise<Codes> {
  if (header.colour === 'cmyk' && !table) return decodeInksWithoutProfile(path)
  const codes = header.format === 'heic' ? await decodeHeic(path, { alpha: header.alpha, sampleBits: header.sampleBits ?? 8 }) : await decodeWithSharp(path, header)
  return table ? throughTable(codes, table.model, header.colour === 'cmyk' ? 4 : 3) : codes
}

/** Runs a decoder; what it can't read is the picture's fault and said so. */
export async function orUnreadable<T>(decoding: Promise<T>): Promise<T> {
  try {
    return await decoding
  }
  catch (error) {
    if (isComputeError(error) || isOutOfMemory(error)) throw error
    throw unreadable('its data is broken or cut off')
  }
}

/** The machine's fault. Decoders that refuse a broken file's demands speak of memory as well, but of a limit too; one in WebAssembly stumbles over its own. */
const isOutOfMemory = (error: unknown): boolean =>
  error instanceof Error && /memory|alloc/i.test(error.message) && !/limit/i.test(error.message) && error.name !== 'RuntimeError'

const isComputeError = (error: unknown): error is ComputeError => error instanceof Error && error.name === 'ComputeError'
