import { readSettings } from '../config'
import { openImageChild, type ImageChild } from '../image/pool'

let opened: ImageChild | undefined

/** The process's one image child: interactive work in web, films in the worker. */
export function imageChild(): ImageChild {
  const settings = readSettings()
  return opened ??= openImageChild({
    programPath: settings.IMAGE_CHILD_PROGRAM,
    addressSpaceBytes: settings.CHILD_ADDRESS_SPACE_BYTES,
    timeoutSeconds: settings.CHILD_TIMEOUT_SECONDS,
  })
}

export async function closeImageChild(): Promise<void> {
  const open = opened
  opened = undefined
  await open?.close()
}
