import { open } from 'node:fs/promises'
import { ComputeError } from '#shared/errors'
import { FileWindow } from './file-window'
import type { PictureHeader } from './header'
import { readJpegHeader } from './jpeg-header'
import { readPngHeader } from './png-header'

const notAnImage = () =>
  new ComputeError('not_an_image', 'This is not a JPEG or PNG picture, whatever its name says. Export the picture as JPEG or PNG and upload that.')

/** Reads the header by the file's content. Throws `not_an_image` or `image_unreadable`. */
export async function readPictureHeader(path: string): Promise<PictureHeader> {
  const file = await open(path)
  try {
    const window = await FileWindow.over(file)
    const start = await window.bytes(0, 8)
    if (start.length >= 3 && start.readUIntBE(0, 3) === 0xFFD8FF) return await readJpegHeader(window)
    if (start.equals(Buffer.from('\x89PNG\r\n\x1A\n', 'latin1'))) return await readPngHeader(window)
    throw notAnImage()
  }
  finally {
    await file.close()
  }
}
