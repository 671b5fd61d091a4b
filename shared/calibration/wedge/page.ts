/** A rectangle in mm; origin at the top-left corner of the film page as the print reads, y down. */
export interface RectMm { xMm: number, yMm: number, widthMm: number, heightMm: number }

/** A marker of the page with the two even patches beside it that references are read from. */
export interface PageMarker {
  /** Index into `markerCodes`: 0 … 3 stand in the corners top-left, top-right, bottom-right, bottom-left. */
  id: number
  place: RectMm
  /** All the ink: paper white on the print. */
  fullInk: RectMm
  /** No ink: the print's deepest tone. */
  clear: RectMm
}

/** A clear place in the middle of full ink: beside the clear patches in the dark it shows how much light strays. */
export interface Island { pad: RectMm, clear: RectMm }

/** Ticks each mm, longer each 5 and 10 mm, along `lengthMm` to the right (x) or down (y) from the corner of `place`. */
export interface Ruler { axis: 'x' | 'y', place: RectMm, lengthMm: number }

/** A place for text, drawn by whoever has fonts; `ink` says whether the letters are full ink or clear. */
export interface PageLabel { id: string, place: RectMm, ink: 'full' | 'clear', text: string | null }

/** An even area, painted before everything else: full ink, or clear again inside of it. */
export interface Ground { place: RectMm, ink: 'full' | 'clear' }

/** Where a wedge's parts stand on its film page. Everything is as the print reads; the film file is this page mirrored. */
export interface WedgePage {
  /** `scattered`: the patches adjoin, row by row; `numbered` and `guide`: they stand apart. */
  kind: 'scattered' | 'numbered' | 'guide'
  widthMm: number
  heightMm: number
  /** The rectangle that holds all patches. */
  field: RectMm
  columns: number
  rows: number
  /** The patches in the wedge's order, whole; their inner part is read. */
  patches: RectMm[]
  /** Bars, lines and pads around the patches, in the order they are painted. */
  grounds: Ground[]
  markers: PageMarker[]
  islands: Island[]
  /** The code: `symbol` holds the 21 × 21 modules, `pad` also the quiet zone of full ink. */
  identity: { pad: RectMm, symbol: RectMm, moduleCount: number }
  rulers: Ruler[]
  labels: PageLabel[]
  /** Full ink, so that pencil shows on the print. */
  writeIn: RectMm
  diagnostics: {
    /** Inside the film: covered with foil during the exposure, so that no light at all arrives. */
    foil: RectMm
    /** Right of the film: coated paper that the lamp reaches without film. */
    bare: RectMm
    /** Further right: paper without a coating, where the sheet goes that far. */
    uncoated: RectMm
  }
  /** Resolution whose pixel grid all edges lie on; null before `snapWedgePage`. */
  pixelsPerInch: number | null
}

/** Rectangle from its corner and sides, in mm. */
export const rect = (xMm: number, yMm: number, widthMm: number, heightMm = widthMm): RectMm => ({ xMm, yMm, widthMm, heightMm })

/** The rectangle around the same centre with its sides multiplied by `share`. */
export const innerRect = (r: RectMm, share: number): RectMm => rect(
  r.xMm + r.widthMm * (1 - share) / 2, r.yMm + r.heightMm * (1 - share) / 2, r.widthMm * share, r.heightMm * share)

/** Centre of a rectangle, mm. */
export const centreOf = (r: RectMm): [number, number] => [r.xMm + r.widthMm / 2, r.yMm + r.heightMm / 2]

/** Size of a label's letters as a share of its place's height: room for what reaches below the line. */
const letterShare = 0.82
const mmPerPoint = 25.4 / 72

/** Height of the place that letters of so many points stand in, mm. */
export const labelPlaceMm = (points: number): number => points * mmPerPoint / letterShare

/** Letters' size in points of 1/72 inch for a label's place. */
export const labelPoints = ({ heightMm }: RectMm): number => heightMm * letterShare / mmPerPoint
