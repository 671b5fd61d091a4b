import { ComputeError } from '#shared/errors'

export const pictureFormats = ['jpeg', 'png', 'tiff', 'heic'] as const
export type PictureFormat = typeof pictureFormats[number]

/** What the file's own header says, before anything is decoded. Sides are the stored ones, before orientation. */
export interface PictureHeader {
  format: PictureFormat
  width: number
  height: number
  /** 1…8, Exif 2.32 tag 274; 1 for HEIC, whose decoder turns the picture itself */
  orientation: number
  bitDepth: 8 | 16
  colour: 'grey' | 'rgb' | 'cmyk'
  alpha: boolean
  /** stored in passes, so that decoding holds the whole picture */
  progressive: boolean
  /** what the file says it was taken with; null where it says nothing */
  device: 'camera' | 'scanner' | null
  icc: Buffer | null
}

/** A phone's motion picture or a maker's notes may be long; more than this is not a photograph's metadata. */
export const metadataMaxBytes = 64_000_000
export const profileMaxBytes = 16_000_000

export const unreadable = (why: string) =>
  new ComputeError('image_unreadable', `This picture can't be read: ${why}. Export it again, or copy it afresh from the phone or camera, and upload that.`)
