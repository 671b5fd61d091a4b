import sharp, { type Sharp } from 'sharp'
import { locateByCorners, locateWedge, type LocatedWedge } from '#shared/calibration/reading/locate-wedge'
import { readLocated } from '#shared/calibration/reading/read-scan'
import { readingWarning } from '#shared/calibration/reading/warnings'
import type { WedgePage } from '#shared/calibration/wedge/page'
import { decodePicture, orUnreadable } from '../decode/decode'
import { inputOptions } from '../decode/with-sharp'
import { requireWithinBudget } from '../header/budget'
import { readPictureHeader } from '../header/read-header'
import type { ImageCalls, PictureSource } from '../protocol'
import { type DecodedScan, decodeScan, withoutAlpha } from '../scan/decode-scan'
import { identifyWedge } from '../scan/identity'

/** The picture that was identified last, for the reading that follows; put away when none does. */
let kept: { path: string, scan: DecodedScan, located: LocatedWedge | null, corners: string } | undefined
const keptForMs = 20_000

type Progress = (fraction: number) => void

/** Share of a reading's time by which the picture is decoded, and the wedge found. */
const [decodedShare, foundShare] = [0.4, 0.6]

export async function identifyScan({ path, pages, corners }: ImageCalls['identifyScan']['in'], onProgress: Progress): Promise<ImageCalls['identifyScan']['out']> {
  kept = undefined
  const scan = await decodeScan({ path })
  onProgress(decodedShare)
  const located = locate(scan, pages, corners)
  const code = await identifyWedge(scan.picture, located)
  onProgress(foundShare)
  kept = { path, scan, located, corners: JSON.stringify(corners) }
  setTimeout(() => kept = undefined, keptForMs).unref()
  const { header: { format, device }, picture: { width, height } } = scan
  return { format, device, width, height, code, found: located !== null }
}

export async function readScan({ path, page, levels, corners, quality, paperLightness }: ImageCalls['readScan']['in']): Promise<ImageCalls['readScan']['out']> {
  const before = kept?.path === path ? kept : undefined
  kept = undefined
  const scan = before?.scan ?? await decodeScan({ path })
  const wasThis = before?.located && before.corners === JSON.stringify(corners) && isSamePage(before.located.page, page)
  const located = wasThis ? before.located : locate(scan, [page], corners)
  if (!located) return { found: false, warnings: [readingWarning('not_found')] }
  const { page: _, ...report } = readLocated(scan.picture, located, { levels: levels ?? undefined, quality, paperLightness })
  return report
}

const locate = ({ picture }: DecodedScan, pages: WedgePage[], corners: ImageCalls['identifyScan']['in']['corners']): LocatedWedge | null => {
  if (pages.length === 0) return null
  return corners ? locateByCorners(picture, pages[0]!, corners) : locateWedge(picture, pages)
}

const isSamePage = (a: WedgePage, b: WedgePage): boolean => JSON.stringify(a) === JSON.stringify(b)

/** The upright picture as a JPEG in sRGB, at most `width` wide, with the read parts of the patches drawn over it when asked. */
export async function makeScanPicture({ target, width, cells, ...source }: ImageCalls['scanPicture']['in']): Promise<ImageCalls['scanPicture']['out']> {
  const { picture, fullWidth } = await openForShowing(source)
  const { data, info } = await orUnreadable(picture.resize({ width: Math.min(width, fullWidth) }).toColourspace('srgb').removeAlpha().raw().toBuffer({ resolveWithObject: true }))
  const shown = sharp(data, { raw: { width: info.width, height: info.height, channels: info.channels } })
  const drawn = cells ? shown.composite([{ input: Buffer.from(cellsSvg(cells, info.width, info.height, info.width / fullWidth)) }]) : shown
  await drawn.jpeg({ quality: 85 }).toFile(target)
  return { width: info.width, height: info.height }
}

async function openForShowing(source: PictureSource): Promise<{ picture: Sharp, fullWidth: number }> {
  const header = await readPictureHeader(source.path)
  requireWithinBudget(header)
  if (header.format === 'heic' || header.format === 'avif') {
    // Phones' colours are shown as sRGB's: the picture is only looked at.
    const { codes, width, height, channels } = withoutAlpha(await decodePicture(source))
    return { picture: sharp(codes, { raw: { width, height, channels: channels as 1 | 3 } }), fullWidth: width }
  }
  return { picture: sharp(source.path, inputOptions).autoOrient(), fullWidth: header.orientation >= 5 ? header.height : header.width }
}

/** A light line in a dark one, so that it shows on every tone. */
function cellsSvg(cells: number[][], width: number, height: number, scale: number): string {
  const path = cells.map(cell => `M${pairs(cell, scale).join('L')}Z`).join('')
  const line = (colour: string, thickness: number) => `<path d="${path}" fill="none" stroke="${colour}" stroke-width="${thickness}"/>`
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">${line('#1F2328', 3)}${line('#F6F1E6', 1)}</svg>`
}

const pairs = (cell: number[], scale: number): string[] =>
  Array.from({ length: cell.length / 2 }, (_, i) => `${(cell[2 * i]! * scale).toFixed(1)} ${(cell[2 * i + 1]! * scale).toFixed(1)}`)
