import { ComputeError } from '#shared/errors'
import type { PictureFormat, PictureNote } from '#shared/schemas/picture-formats'

/** What the file's own header says, before anything is decoded. Sides are the stored ones, before orientation. */
export interface PictureHeader {
  format: PictureFormat
  width: number
  height: number
  /** 1…8, Exif 2.32 tag 274; 1 for HEIC and AVIF, whose decoders turn the picture by the file's own properties */
  orientation: number
  bitDepth: 8 | 16
  colour: 'grey' | 'rgb' | 'cmyk'
  alpha: boolean
  /** stored in passes, so that decoding holds the whole picture */
  progressive: boolean
  /** what the file says it was taken with; null where it says nothing */
  device: 'camera' | 'scanner' | null
  icc: Buffer | null
  /** colours given by numbers, where there is no profile */
  codePoints?: CodePoints
  /** light = code to this power, where a PNG says so and has no profile */
  exponent?: number
  /** pixels that the decoder will really make, where the coded data says more than the sides above */
  codedPixels?: number
  /** the sample depth before it was stretched to 16 bits, where that matters */
  sampleBits?: number
  /** what else the file holds and is not looked at */
  notes?: PictureNote[]
}

/** ColourPrimaries and TransferCharacteristics of ITU-T H.273, tables 2 and 3. */
export interface CodePoints { primaries: number, transfer: number }

/** A phone's motion picture or a maker's notes may be long; more than this is not a photograph's metadata. */
export const metadataMaxBytes = 64_000_000
export const profileMaxBytes = 16_000_000

export const unreadable = (why: string) =>
  new ComputeError('image_unreadable', `This picture can't be read: ${why}. Export it again, or copy it afresh from the phone or camera, and upload that.`)
