import type { Cause } from '../schemas/wedges'
import { assumedPaperLightness } from './measurements'

/** What was read besides the patches, L*; null where a place was not there. */
export interface DiagnosticPlaces {
  /** coated paper under foil: no UV at all, then washed */
  foil: number | null
  /** coated paper beside the film: all of the lamp's light */
  bare: number | null
  /** through clear film, the print's black */
  clear: number | null
  /** through all the ink */
  fullInk: number | null
  /** paper that was never coated */
  uncoated: number | null
}

/** How much lighter one side of a print came out than its middle by its light alone: L* per half width to the right and per half height down. */
export interface LightSlope { right: number, down: number }

export interface CauseInput {
  places: DiagnosticPlaces
  /** width of printed edges from 10 to 90 %, mm, and the picture's pixels along a mm; null for measured values */
  edge: { widthMm: number, pixelsPerMm: number } | null
  /** the print reads mirrored */
  isMirrored: boolean
  /** of each print of the bench made with one lamp and frame */
  lightSlopes: readonly LightSlope[]
}

export interface Evidence { what: string, value: number, unit: 'L*' | 'mm' | 'prints' }
export interface FoundCause { code: Cause['code'], message: string, evidence: Evidence[] }

/** Differences that are more than a reading's own, L*. Common practice, no source. */
const leastDifference = 1
const leastStain = 2
/** Edges wider than this after the picture's own softness has been taken off, mm: light creeps under the film. */
const greatestContactEdgeMm = 0.4
/** 10 to 90 % width of an edge in a well-focused picture, pixels. */
const pictureEdgePx = 1.8
/** L* from the middle to the side, and the share of it that all prints must have in common. */
const leastSlope = 1
const leastCommonShare = 0.7
const leastPrints = 2

/**
 * Why a print came out as it did where a curve is not the cure, each with its evidence in numbers. None found: an empty list.
 * Places that were not read say nothing. Thresholds: 1 L* between places, 2 L* of stain, 0.4 mm of edge, 1 L* of slope.
 */
export function findCauses({ places: given, edge, isMirrored, lightSlopes }: CauseInput): FoundCause[] {
  const places = { ...given, foil: wasLaid(given) ? given.foil : null }
  return [wrongSideUp(isMirrored), exposeLonger(places), moreInk(places), wash(places), pressHarder(edge), rotateTheFrame(lightSlopes)].filter(cause => cause !== null)
}

/** Foil lets nothing through, so a place darker than full ink had none on it. */
const wasLaid = ({ foil, fullInk }: DiagnosticPlaces): boolean => foil !== null && (fullInk === null || fullInk - foil <= leastStain)

/** A cause's evidence as the screens and the contract carry it. */
export const evidenceSays = (evidence: readonly Evidence[]): string =>
  evidence.map(({ what, value, unit }) => unit === 'prints' ? `${value} prints` : `${what} ${unit === 'mm' ? value.toFixed(2) : figure(value)} ${unit}`).join(', ')

const figure = (value: number): string => value.toFixed(1)

function wrongSideUp(isMirrored: boolean): FoundCause | null {
  return isMirrored ? { code: 'wrong-side-up', message: 'The print reads mirrored: the film lay with its printed side up, away from the paper. Its patches were read all the same, but edges are softer so; lay the printed side on the coating.', evidence: [] } : null
}

function exposeLonger({ bare, clear }: DiagnosticPlaces): FoundCause | null {
  if (bare === null || clear === null || clear - bare <= leastDifference) return null
  return {
    code: 'expose-longer',
    message: `Expose longer: beside the film the paper got ${figure(clear - bare)} L* darker than through clear film, so the print's black is not yet the paper's.`,
    evidence: [{ what: 'through clear film', value: clear, unit: 'L*' }, { what: 'beside the film', value: bare, unit: 'L*' }],
  }
}

function moreInk({ foil, fullInk }: DiagnosticPlaces): FoundCause | null {
  if (foil === null || fullInk === null || foil - fullInk <= leastDifference) return null
  return {
    code: 'more-ink',
    message: `The ink lets UV through: full ink prints ${figure(foil - fullInk)} L* darker than the paper under foil. More ink, or a mix that blocks more, gives a clean white.`,
    evidence: [{ what: 'under full ink', value: fullInk, unit: 'L*' }, { what: 'under foil', value: foil, unit: 'L*' }],
  }
}

function wash({ foil, fullInk, uncoated }: DiagnosticPlaces): FoundCause | null {
  const paper = uncoated ?? assumedPaperLightness
  if (foil === null || paper - foil <= leastStain) return null
  const ink = fullInk !== null && foil - fullInk <= leastDifference ? ' Full ink is no darker than that, so leave the ink alone.' : ''
  const assumed = uncoated === null ? ` (the paper taken as L* ${assumedPaperLightness}, as none was left uncoated: if it is naturally darker, this is not stain)` : ''
  return {
    code: 'wash',
    message: `Stain or wash: even without any UV the coated paper stays ${figure(paper - foil)} L* darker than plain paper${assumed}. Wash or clear longer, or coat and print sooner.${ink}`,
    evidence: [
      { what: 'under foil', value: foil, unit: 'L*' }, ...(fullInk === null ? [] : [{ what: 'under full ink', value: fullInk, unit: 'L*' } as const]),
      { what: uncoated === null ? 'plain paper, assumed' : 'plain paper', value: paper, unit: 'L*' },
    ],
  }
}

function pressHarder(edge: CauseInput['edge']): FoundCause | null {
  if (edge === null || !(edge.pixelsPerMm > 0)) return null
  const contactMm = Math.sqrt(Math.max(0, edge.widthMm ** 2 - (pictureEdgePx / edge.pixelsPerMm) ** 2))
  if (!(contactMm > greatestContactEdgeMm)) return null
  return {
    code: 'press-harder',
    message: `Press harder: printed edges are ${contactMm.toFixed(2)} mm soft beyond what the scan itself softens. Film and paper did not touch everywhere (or the scan is out of focus).`,
    evidence: [{ what: 'width of edges, 10 to 90 %', value: edge.widthMm, unit: 'mm' }, { what: 'left when the scan\'s own is taken off', value: contactMm, unit: 'mm' }],
  }
}

/** A fall-off that all prints share comes from the lamp or the frame; one that changes comes from the coating. */
function rotateTheFrame(slopes: readonly LightSlope[]): FoundCause | null {
  if (slopes.length < leastPrints) return null
  const mean = (of: (slope: LightSlope) => number): number => slopes.reduce((sum, s) => sum + of(s), 0) / slopes.length
  const common = Math.hypot(mean(s => s.right), mean(s => s.down))
  const typical = mean(s => Math.hypot(s.right, s.down))
  if (common < leastSlope || common < leastCommonShare * typical) return null
  return {
    code: 'rotate-frame',
    message: `Rotate the frame halfway through the exposure: on all ${slopes.length} prints the light falls off towards the ${sideOf(mean(s => s.right), mean(s => s.down))}, by ${figure(common)} L* from the middle.`,
    evidence: [{ what: 'common fall-off from the middle to the side', value: common, unit: 'L*' }, { what: 'fall-off of a single print, mean', value: typical, unit: 'L*' }, { what: 'prints', value: slopes.length, unit: 'prints' }],
  }
}

/** Where it gets lighter, less light arrived. */
function sideOf(right: number, down: number): string {
  return Math.abs(right) >= Math.abs(down) ? right > 0 ? 'right' : 'left' : down > 0 ? 'lower edge' : 'upper edge'
}
