import { readSettings } from '../config'
import { openImageChild, type ImageChild } from '../image/pool'

/** Somebody waits at a screen for web's answers; a film may take its time. */
const filmNiceness = 10

let opened: ImageChild | undefined

/** The process's one image child, for interactive work. */
export const imageChild = (): ImageChild => opened ??= open(0)

/** The worker's one image child, for films: it steps back before web. */
export const filmChild = (): ImageChild => opened ??= open(filmNiceness)

function open(niceness: number): ImageChild {
  const { IMAGE_CHILD_PROGRAM, CHILD_ADDRESS_SPACE_BYTES, CHILD_TIMEOUT_SECONDS } = readSettings()
  return openImageChild({ programPath: IMAGE_CHILD_PROGRAM, addressSpaceBytes: CHILD_ADDRESS_SPACE_BYTES, timeoutSeconds: CHILD_TIMEOUT_SECONDS, niceness })
}

export async function closeImageChild(): Promise<void> {
  const closing = opened
  opened = undefined
  await closing?.close()
}
