import { ComputeError } from '#shared/errors'

/** What the file's own header says, before anything is decoded. Sides are the stored ones, before orientation. */
export interface PictureHeader {
  format: 'jpeg' | 'png'
  width: number
  height: number
  /** 1…8, Exif 2.32 tag 274 */
  orientation: number
  bitDepth: 8 | 16
  colour: 'grey' | 'rgb' | 'cmyk'
  alpha: boolean
  /** stored in passes, so that decoding holds the whole picture */
  progressive: boolean
  icc: Buffer | null
}

/** A phone's motion picture or a maker's notes may be long; more than this is not a photograph's metadata. */
export const metadataMaxBytes = 64_000_000
export const profileMaxBytes = 16_000_000

export const unreadable = (why: string) =>
  new ComputeError('image_unreadable', `This picture can't be read: ${why}. Export it again, or copy it afresh from the phone or camera, and upload that.`)

