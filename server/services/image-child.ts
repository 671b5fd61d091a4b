import { readSettings } from '../config'
import { openImageChild, type ImageChild } from '../image/pool'

/** How far each child steps back: somebody waits at a screen for web's answers and for a reading; a film may take its time. */
const niceness = { interactive: 0, readings: 0, films: 10 } as const

const opened = new Map<keyof typeof niceness, ImageChild>()

/** Web's one image child, for interactive work. */
export const imageChild = (): ImageChild => childFor('interactive')

/** The worker's two: one for films, which steps back before all others, and one for readings. */
export const filmChild = (): ImageChild => childFor('films')
export const readingChild = (): ImageChild => childFor('readings')

function childFor(work: keyof typeof niceness): ImageChild {
  const known = opened.get(work)
  if (known) return known
  const { IMAGE_CHILD_PROGRAM, CHILD_ADDRESS_SPACE_BYTES, CHILD_TIMEOUT_SECONDS } = readSettings()
  const child = openImageChild({ programPath: IMAGE_CHILD_PROGRAM, addressSpaceBytes: CHILD_ADDRESS_SPACE_BYTES, timeoutSeconds: CHILD_TIMEOUT_SECONDS, niceness: niceness[work] })
  opened.set(work, child)
  return child
}

export async function closeImageChildren(): Promise<void> {
  const closing = [...opened.values()]
  opened.clear()
  await Promise.all(closing.map(child => child.close()))
}
