import { open } from 'node:fs/promises'
import { ComputeError } from '#shared/errors'
import { pictureFormatNames } from '#shared/schemas/picture-formats'
import { FileWindow } from './file-window'
import { type PictureHeader, unreadable } from './header'
import { isHeif, readHeifHeader } from './heif-header'
import { readJpegHeader } from './jpeg-header'
import { readPngHeader } from './png-header'
import { readTiffHeader } from './tiff-header'
import { isWebp, readWebpHeader } from './webp-header'

/** Reads the header by the file's content, whatever its name or its sender says. Throws `not_an_image` or `image_unreadable`. */
export async function readPictureHeader(path: string): Promise<PictureHeader> {
  const file = await open(path)
  try {
    const window = await FileWindow.over(file)
    const read = readerOf(await window.bytes(0, 256))
    if (!read) throw notAnImage()
    return await read(window)
  }
  catch (error) {
    // A buffer read past its end: the header points beyond the file.
    if (error instanceof RangeError) throw unreadable('its header is cut off or makes no sense')
    throw error
  }
  finally {
    await file.close()
  }
}

function readerOf(start: Buffer): ((window: FileWindow) => Promise<PictureHeader>) | undefined {
  if (start.length >= 3 && start.readUIntBE(0, 3) === 0xFFD8FF) return readJpegHeader
  if (start.subarray(0, 8).equals(Buffer.from('\x89PNG\r\n\x1A\n', 'latin1'))) return readPngHeader
  const mark = start.toString('latin1', 0, 4)
  if (['II*\0', 'MM\0*'].includes(mark) && start.length >= 8) return readTiffHeader
  if (['II+\0', 'MM\0+'].includes(mark)) throw unreadable('it is a BigTIFF (export it as a plain TIFF of less than 4 GB)')
  if (isWebp(start)) return readWebpHeader
  return isHeif(start) ? readHeifHeader : undefined
}

function notAnImage(): ComputeError {
  const list = new Intl.ListFormat('en', { type: 'disjunction' }).format(Object.values(pictureFormatNames))
  return new ComputeError('not_an_image', `This is not a ${list} picture, whatever its name says. Export the picture as one of these and upload that.`)
}
