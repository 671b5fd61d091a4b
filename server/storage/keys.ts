/** Kinds of files that are kept for good; they live in the bucket where one is configured. All others belong to one machine. */
export const keptKinds = ['originals', 'scans', 'films'] as const

export const isKept = (key: string): boolean => keptKinds.some(kind => key === kind || key.startsWith(`${kind}/`))

/** Where uploads grow until they are whole: their rows, and no lease, say how long they stay. */
export const partsFolder = 'temporary/parts'

/** The folders that hold a studio's files. */
export const studioFolders = (studioId: string) => [...keptKinds, 'cache', partsFolder].map(kind => `${kind}/${studioId}`)

/** Keys are made of ids and hashes only, never of what people typed. */
export const storageKeys = {
  original: (studioId: string, photoId: string) => `originals/${studioId}/${photoId}`,
  part: (studioId: string, uploadId: string) => `${partsFolder}/${studioId}/${uploadId}`,
  scan: (studioId: string, readingId: string) => `scans/${studioId}/${readingId}`,
  pictureFolder: (studioId: string, photoId: string) => `cache/${studioId}/${photoId}`,
  thumbnail: (studioId: string, photoId: string) => `cache/${studioId}/${photoId}/thumbnail.jpg`,
  /** a proxy's, forecast's, wedge preview's or shown scan's bytes, by the hash of what was asked */
  picture: (studioId: string, recordId: string, hash: string) => `cache/${studioId}/${recordId}/${hash}`,
  /** the decoded codes of a picture that is slow to decode */
  working: (studioId: string, recordId: string) => `cache/${studioId}/${recordId}/working`,
  film: (studioId: string, renderKey: string, format: string) => `films/${studioId}/${renderKey}.${format}`,
}
