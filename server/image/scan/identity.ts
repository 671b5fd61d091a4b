import { findingPlane } from '#shared/calibration/reading/finding-plane'
import type { LocatedWedge } from '#shared/calibration/reading/locate-wedge'
import { greatestCodeOf, type ScanPicture } from '#shared/calibration/reading/picture'
import type { RectMm } from '#shared/calibration/wedge/page'
import { type GreyPlane, readIdentities } from './code-reader'

/** Pixels a millimetre of the code's place when it is laid straight: about 10 and 20 a module. */
const straightScales = [10, 20]
/** Longer sides of the whole picture when the code is looked for everywhere, pixels. */
const planeSides = [1600, 3200]

/**
 * The code that a picture shows, or null. First from its place on the page, laid straight and stretched to full contrast, then from the
 * whole picture at two sizes. More than one code of ours (two prints on the glass) counts only where the page's place decides it.
 */
export async function identifyWedge(picture: ScanPicture, located: LocatedWedge | null): Promise<string | null> {
  for (const scale of located ? straightScales : []) {
    const plane = straightened(picture, located!, scale)
    for (const binarizer of ['LocalAverage', 'GlobalHistogram'] as const) {
      const [code] = await readIdentities(plane, binarizer)
      if (code) return code
    }
  }
  for (const side of planeSides) {
    const codes = await readIdentities(findingPlane(picture, side))
    if (codes.length > 0) return codes.length === 1 ? codes[0]! : null
  }
  return null
}

/** The code's pad as the print reads, light and dark as on the print. */
function straightened(picture: ScanPicture, { page, map, sample }: LocatedWedge, pixelsPerMm: number): GreyPlane {
  const { xMm, yMm, widthMm, heightMm }: RectMm = page.identity.pad
  const [width, height] = [Math.round(widthMm * pixelsPerMm), Math.round(heightMm * pixelsPerMm)]
  const values = new Float32Array(width * height)
  let [least, most] = [Infinity, -Infinity]
  for (let y = 0, at = 0; y < height; y++) {
    for (let x = 0; x < width; x++, at++) {
      const [u, v] = map([xMm + (x + 0.5) / pixelsPerMm, yMm + (y + 0.5) / pixelsPerMm])
      const value = values[at] = sample(u, v) / greatestCodeOf(picture)
      if (value < least) least = value
      if (value > most) most = value
    }
  }
  return { width, height, values: Uint8Array.from(values, value => 255 * (value - least) / Math.max(1e-6, most - least)) }
}
