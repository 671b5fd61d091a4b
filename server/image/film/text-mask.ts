import { existsSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import sharp from 'sharp'

/** A picture of text: 0 no ink … 255 full, row by row. */
export interface TextMask { width: number, height: number, coverage: Uint8Array }

/** The font stands with the sources; the bundled program lies somewhere below the same root. */
function findFont(): string {
  for (let folder = dirname(fileURLToPath(import.meta.url)); ; folder = dirname(folder)) {
    const path = join(folder, 'server/image/fonts/IBMPlexSans-Regular.ttf')
    if (existsSync(path)) return path
    if (folder === dirname(folder)) throw new Error('server/image/fonts/IBMPlexSans-Regular.ttf is missing')
  }
}

const withoutMarkup = (text: string) => text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;')

/** One line of text at a size in points of 1/72 inch. */
export async function drawText(text: string, sizePoints: number, pixelsPerInch: number): Promise<TextMask> {
  const line = withoutMarkup(text.replace(/\s+/g, ' ').trim())
  const { data, info } = await sharp({ text: { text: line, font: `IBM Plex Sans ${sizePoints}`, fontfile: findFont(), dpi: pixelsPerInch } })
    .toColourspace('b-w').raw().toBuffer({ resolveWithObject: true })
  return { width: info.width, height: info.height, coverage: data }
}
