import { labFromXyz } from '../../tone/lab'
import { lightnessFromLuminance, luminanceFromLightness } from '../../tone/lightness'
import type { RectMm, WedgePage } from '../wedge/page'
import { centreOf } from '../wedge/page'
import type { FieldReference } from './flat-field'
import { flatFieldFrom } from './flat-field'
import type { Glare, Light } from './glare'
import { fitGlare, glareRadiiMm, noGlare, withoutGlare } from './glare'
import type { LightAround } from './light-plane'
import type { PageMap } from './page-map'
import type { PatchReader, PatchStatistics } from './patch-statistics'

/** One place of the print as read. */
export interface PatchReading {
  lightness: number
  /** L*a*b*, D50. */
  lab: [number, number, number]
  /** Robust standard deviation of the pixels, L*. */
  deviation: number
  /** Share of the pixels left out as dust, hairs or spots. */
  rejectedShare: number
  /** Share of the pixels at the scale's lightest and darkest value. */
  clippedLightShare: number
  clippedDarkShare: number
  pixelCount: number
}

export interface ReadingOptions {
  /** Ink levels of the patches in the wedge's order. With them stray light is looked for and taken out. */
  levels?: ArrayLike<number>
  /** Even out the light from the references beside the markers: for phone pictures. */
  flatField?: boolean
  /** L* of the paper under full ink, measured otherwise: light is scaled so that the full-ink references read so. For phone pictures. */
  paperLightness?: number
}

/** What is needed to read and correct a place. */
export interface ReadingScene { page: WedgePage, map: PageMap, read: PatchReader, around: LightAround, pixelsPerMm: number }

export interface Correction { apply: (statistics: PatchStatistics, at: RectMm) => PatchReading, glare: Glare, whiteUnevenness: number }

/** The corrections that a picture's own references ask for, in this order: stray light, even light, paper white. */
export function correctionFor(scene: ReadingScene, options: ReadingOptions): Correction {
  const { page } = scene
  const glare = options.levels ? fitGlare(glareReferences(scene, options.levels)) : noGlare
  const unglared = (at: RectMm, light: Light): Light => glare.total > 0 ? withoutGlare(light, surroundings(scene, at), glare) : light
  const references = (places: RectMm[]): FieldReference[] =>
    lights(scene, places).map(({ at, light }) => ({ atMm: centreOf(at), luminance: unglared(at, light)[1] }))
  const whites = references(page.markers.map(marker => marker.fullInk))
  const field = options.flatField ? flatFieldFrom(whites, references(page.markers.map(marker => marker.clear))) : null
  const scale = options.paperLightness === undefined || whites.length === 0 ? 1 : luminanceFromLightness(options.paperLightness) / meanLuminance(whites)
  return {
    glare, whiteUnevenness: rangeOf(whites),
    apply: (statistics, at) => {
      const light = unglared(at, lightOf(statistics))
      const even = field ? field(centreOf(at), light) : light
      return readingOf(statistics, [even[0] * scale, even[1] * scale, even[2] * scale])
    },
  }
}

/** Greatest less least L* of the references; 0 where there are none. */
function rangeOf(references: FieldReference[]): number {
  const lightnesses = references.map(r => lightnessFromLuminance(r.luminance))
  return lightnesses.length === 0 ? 0 : Math.max(...lightnesses) - Math.min(...lightnesses)
}

const meanLuminance = (references: FieldReference[]): number => references.reduce((sum, r) => sum + r.luminance, 0) / references.length

const surroundings = ({ map, around, pixelsPerMm }: ReadingScene, at: RectMm): Light[] => {
  const centre = map(centreOf(at))
  return glareRadiiMm.map(radius => around(centre, radius * pixelsPerMm))
}

function glareReferences(scene: ReadingScene, levels: ArrayLike<number>): Parameters<typeof fitGlare>[0] {
  const { page } = scene
  const places = [
    ...page.patches.map((at, i) => ({ at, level: levels[i]! })),
    ...page.markers.flatMap(({ clear, fullInk }) => [{ at: clear, level: 0 }, { at: fullInk, level: 1 }]),
    ...page.islands.map(({ clear }) => ({ at: clear, level: 0 })),
  ]
  return places.flatMap(({ at, level }) => lights(scene, [at]).map(({ light }) => ({
    atMm: centreOf(at), level, luminance: light[1], aroundLuminance: surroundings(scene, at).map(around => around[1]),
  })))
}

/** The lights of those places that lie in the picture. */
const lights = ({ read }: ReadingScene, places: RectMm[]): { at: RectMm, light: Light }[] => places.flatMap((at) => {
  const statistics = read(at)
  return statistics ? [{ at, light: lightOf(statistics) }] : []
})

/** A patch's light: its colour from the mean of the pixels' light, its luminance from the robust centre of their L*. */
function lightOf({ lightness, xyz }: PatchStatistics): Light {
  const luminance = luminanceFromLightness(Math.max(0, lightness))
  const scale = xyz[1] > 0 ? luminance / xyz[1] : 0
  return [xyz[0] * scale, luminance, xyz[2] * scale]
}

function readingOf(statistics: PatchStatistics, light: Light): PatchReading {
  const lightness = lightnessFromLuminance(light[1])
  const [, a, b] = labFromXyz(light)
  const { deviation, rejectedShare, clippedLightShare, clippedDarkShare, count } = statistics
  return { lightness, lab: [lightness, a, b], deviation, rejectedShare, clippedLightShare, clippedDarkShare, pixelCount: count }
}
