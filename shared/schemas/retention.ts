/** How long things are kept that nobody asked to keep for ever: kind → days. One table for sweeps and for what screens say. */
export const retentionDays = {
  /** a photo in the bin, with its files and the negatives made of it */
  binnedPhoto: 30,
  /** a file that has arrived in part, or waits to be taken */
  unfinishedUpload: 7,
  /** what became of an upload: only so that its sender can ask again */
  finishedUpload: 1,
} as const

export const dayMs = 86_400_000
