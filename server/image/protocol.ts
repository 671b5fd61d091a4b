import type { BaseExposure, ExposureGoal, ExposureValue } from '#shared/calibration/base-exposure'
import type { CheckPatch, CurveCheck } from '#shared/calibration/curve-check'
import type { CurveFit, CurveReading } from '#shared/calibration/curve-fit'
import type { Evenness, EvennessPatch } from '#shared/calibration/evenness'
import type { BandedResponse, FilmDensity } from '#shared/calibration/film-densities'
import type { InkTrial, TrialPatch } from '#shared/calibration/ink-trial'
import type { Point } from '#shared/calibration/reading/picture'
import type { ReadingQuality } from '#shared/calibration/reading/quality'
import type { ScanReport } from '#shared/calibration/reading/read-scan'
import type { TabletStep } from '#shared/calibration/step-tablet'
import type { WedgePage } from '#shared/calibration/wedge/page'
import type { WedgePlan } from '#shared/calibration/wedge/plan'
import type { ReadingChannel } from '#shared/schemas/benches'
import type { Aim } from '#shared/schemas/curves'
import type { PaletteKind } from '#shared/tone/palettes'
import type { Adjustments, FilmFormat } from '#shared/schemas/negatives'
import type { PictureFormat, PictureNote } from '#shared/schemas/picture-formats'
import type { PictureHeader } from './header/header'

/** What stands in a picture file's header, read before anything is decoded. */
export interface PictureFacts {
  format: PictureFormat
  /** pixels of the upright picture */
  width: number
  height: number
  orientation: number
  bitDepth: 8 | 16
  colourProfile: string
  /** what else the file holds and is left out */
  notes: PictureNote[]
}

/** A picture's file, and where its decoded codes may be kept between calls if decoding is slow. */
export interface PictureSource { path: string, working?: string }

/** Which part of the upright picture is shown, and how it is turned; api.md's coordinates. */
export interface Geometry {
  quarterTurns: number
  straightenDegrees: number
  /** fractions of the turned, straightened picture's bounding rectangle */
  crop: { x: number, y: number, width: number, height: number }
}

/** From a photo's pixels to ink levels. */
export interface ToneOrder {
  adjustments: Adjustments
  aim: Aim
  /** print lightness at 1025 equal steps of ink level */
  response: number[]
}

/** All that decides a film file's bytes, with the original's hash and the engine's version. */
export interface FilmOrder {
  format: FilmFormat
  geometry: Geometry
  tone: ToneOrder
  /** the picture's own pixels, without margins; where the crop's shape differs (contain) it is centred and the rest filled like the margin */
  picture: { widthPixels: number, heightPixels: number }
  margin: { pixels: number, kind: 'clear' | 'opaque' }
  pixelsPerInch: number
  mirror: boolean
  inkColor: string
  marks: { ruler: boolean, label: boolean, labelText: string }
  /** exact, for the PDF's boxes */
  filmMm: { width: number, height: number }
}

/** All that decides a wedge's film file, with the engine's version. `page` is the film sheet, which is the file's page. */
export interface WedgeFilmOrder {
  format: FilmFormat
  plan: WedgePlan
  code: string
  page: { widthMm: number, heightMm: number }
  /** 1025 levels of the curve that the wedge is printed through, by tone */
  throughCurve: number[] | null
  pixelsPerInch: number
  mirror: boolean
  inkColor: string
  /** bench, date, path */
  lines: string[]
  title: string
}

/** A patch of a wedge for what it tells besides its tone. */
export interface PlacedPatch extends EvennessPatch { tone?: number }

/** What a scan's file says, and the wedge that it shows. */
export interface IdentifiedScan {
  format: PictureFormat
  device: PictureHeader['device']
  /** pixels of the upright picture */
  width: number
  height: number
  /** the code on the film, where it could be read */
  code: string | null
  /** whether one of the pages was found in the picture */
  found: boolean
}
/** Centres of the corner markers, put by hand. */
export type Corners = [Point, Point, Point, Point]

type WithoutPage<T> = T extends { page: unknown } ? Omit<T, 'page'> : T

/** Calls to an image child; paths are absolute. Each answers or fails with a ComputeError's code. */
export interface ImageCalls {
  /** header, budget, and one reading of all the data: what is cut off or broken is refused here */
  probe: { in: PictureSource, out: PictureFacts }
  /** upright black-and-white JPEG, `longerSide` pixels at most */
  thumbnail: { in: PictureSource & { target: string, longerSide: number }, out: { width: number, height: number } }
  /** interleaved 16-bit little-endian working-space channels, exactly width × height pixels */
  proxy: { in: PictureSource & { target: string, geometry: Geometry, width: number, height: number }, out: { width: number, height: number } }
  /** writes the film file; progress 0…1 comes in between */
  film: { in: PictureSource & { target: string, order: FilmOrder, renderKey: string }, out: { bytes: number, sha256: string } }
  /** the same for a wedge, which is laid out from its record */
  wedgeFilm: { in: { target: string, order: WedgeFilmOrder, renderKey: string }, out: { bytes: number, sha256: string } }
  /** a wedge's sheet as its print may read, as an 8-bit PNG */
  wedgePreview: { in: { target: string, order: WedgeFilmOrder, width: number, palette: string }, out: { width: number, height: number } }
  /** one state of the triptych as an 8-bit PNG, through the same code as film */
  forecast: { in: PictureSource & { target: string, order: FilmOrder, width: number, state: 'photo' | 'film' | 'print', palette: PaletteKind }, out: { width: number, height: number } }
  /** `fitCurve` of shared/calibration: too long for the process that answers requests */
  fitCurve: { in: { readings: CurveReading[], channel: ReadingChannel }, out: CurveFit }
  /** decodes a scan and looks for its code; the picture is kept for the `readScan` that follows */
  identifyScan: { in: { path: string, pages: WedgePage[], corners?: Corners }, out: IdentifiedScan }
  /** every patch of the wedge whose page and levels are given */
  readScan: { in: { path: string, page: WedgePage, levels: number[] | null, corners?: Corners, quality?: ReadingQuality, paperLightness?: number }, out: WithoutPage<ScanReport> }
  /** upright JPEG of a scan; `cells` are corners of the patches' read parts in its full pixels, x and y in turn */
  scanPicture: { in: PictureSource & { target: string, width: number, cells?: number[][] }, out: { width: number, height: number } }
  /** the calculations of shared/calibration that take a tenth of a second and more */
  findBaseExposure: { in: { values: ExposureValue[], goal: ExposureGoal }, out: BaseExposure }
  splitFilm: { in: { wedge: BandedResponse, steps: TabletStep[] }, out: FilmDensity[] }
  curveThroughFilm: { in: { film: FilmDensity[], steps: TabletStep[] }, out: { response: number[], low: number[], high: number[] } }
  evenness: { in: { patches: PlacedPatch[] }, out: Evenness }
  checkCurve: { in: { patches: CheckPatch[], curve: { aim: Aim, black: number, white: number } }, out: CurveCheck }
  readInkTrial: { in: { patches: TrialPatch[], names: string[], foilLightness?: number }, out: InkTrial }
}
