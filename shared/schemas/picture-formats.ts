/** What photos and scans are taken as: one list for the reading of headers, the tables, the screens and the answers. */
export const pictureFormats = ['jpeg', 'png', 'tiff', 'webp', 'avif', 'heic'] as const
export type PictureFormat = typeof pictureFormats[number]

export const pictureFormatNames: Record<PictureFormat, string> = { jpeg: 'JPEG', png: 'PNG', tiff: 'TIFF', webp: 'WebP', avif: 'AVIF', heic: 'HEIC' }

/** Endings of file names, the one that we give first. */
export const pictureEndings: Record<PictureFormat, readonly [string, ...string[]]> = {
  jpeg: ['jpg', 'jpeg', 'jpe', 'jfif', 'mpo'], png: ['png'], tiff: ['tif', 'tiff'], webp: ['webp'], avif: ['avif'], heic: ['heic', 'heif', 'hif'],
}

export const pictureMediaType = (format: PictureFormat): string => `image/${format}`
export const pictureMediaTypes: readonly string[] = pictureFormats.map(pictureMediaType)

/** For a file field: types, and endings where a system does not know the type. */
export const pictureAccept: string = [...pictureMediaTypes, 'image/heif', ...Object.values(pictureEndings).flat().map(ending => `.${ending}`)].join(',')

/** What is left out of a picture that holds more than one still photograph can show. */
export const pictureNotes = ['gain_map', 'several_pictures', 'motion', 'animation'] as const
export type PictureNote = typeof pictureNotes[number]
