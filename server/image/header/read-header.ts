import { open } from 'node:fs/promises'
import { ComputeError } from '#shared/errors'
import { FileWindow } from './file-window'
import type { PictureFormat, PictureHeader } from './header'
import { isHeic, readHeicHeader } from './heic-header'
import { readJpegHeader } from './jpeg-header'
import { readPngHeader } from './png-header'
import { readTiffHeader } from './tiff-header'

/** What photos are taken as; scans may come in all formats. */
export const photoFormats = ['jpeg', 'png'] as const satisfies PictureFormat[]

type HeaderOf<F extends PictureFormat> = PictureHeader & { format: F }

const readers: Record<PictureFormat, (window: FileWindow) => Promise<PictureHeader>> =
  { jpeg: readJpegHeader, png: readPngHeader, tiff: readTiffHeader, heic: readHeicHeader }
const names: Record<PictureFormat, string> = { jpeg: 'JPEG', png: 'PNG', tiff: 'TIFF', heic: 'HEIC' }

/** Reads the header by the file's content. Throws `not_an_image` or `image_unreadable`. */
export async function readPictureHeader(path: string): Promise<HeaderOf<typeof photoFormats[number]>>
export async function readPictureHeader<F extends PictureFormat>(path: string, wanted: readonly F[]): Promise<HeaderOf<F>>
export async function readPictureHeader(path: string, wanted: readonly PictureFormat[] = photoFormats): Promise<PictureHeader> {
  const file = await open(path)
  try {
    const window = await FileWindow.over(file)
    const format = formatOf(await window.bytes(0, 64))
    if (!format || !wanted.includes(format)) throw notAnImage(wanted)
    return await readers[format](window)
  }
  finally {
    await file.close()
  }
}

function formatOf(start: Buffer): PictureFormat | undefined {
  if (start.length >= 3 && start.readUIntBE(0, 3) === 0xFFD8FF) return 'jpeg'
  if (start.subarray(0, 8).equals(Buffer.from('\x89PNG\r\n\x1A\n', 'latin1'))) return 'png'
  if (['II*\0', 'MM\0*'].includes(start.toString('latin1', 0, 4)) && start.length >= 8) return 'tiff'
  return isHeic(start) ? 'heic' : undefined
}

function notAnImage(wanted: readonly PictureFormat[]): ComputeError {
  const list = new Intl.ListFormat('en', { type: 'disjunction' }).format(wanted.map(format => names[format]))
  return new ComputeError('not_an_image', `This is not a ${list} picture, whatever its name says. Export the picture as ${list} and upload that.`)
}
