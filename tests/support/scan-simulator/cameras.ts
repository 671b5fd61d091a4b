import { seededRandom } from '../../../shared/calibration/random'
import type { Camera, Point } from './camera'

/** A film page's sides, mm. */
interface PageSize { widthMm: number, heightMm: number }

export interface FlatbedPlacement {
  pixelsPerInch: number
  /** Clockwise. */
  skewDegrees?: number
  quarterTurns?: number
  mirrored?: boolean
  /** Greatest shift of the paper's own waves, mm. */
  warpMm?: number
  /** Scanned area around the film, mm; negative crops it. */
  marginMm?: number
  seed?: number
}

/** A page on a flatbed's glass: turned, skewed, mirrored, gently warped. The picture holds the page and a margin. */
export function flatbed(page: PageSize, placement: FlatbedPlacement): Camera {
  const perMm = placement.pixelsPerInch / 25.4
  const margin = placement.marginMm ?? 12
  const turns = placement.quarterTurns ?? 0
  const angle = (placement.skewDegrees ?? 0) * Math.PI / 180 + turns * Math.PI / 2
  const [cos, sin] = [Math.cos(angle), Math.sin(angle)]
  const [w, h] = turns % 2 ? [page.heightMm, page.widthMm] : [page.widthMm, page.heightMm]
  const [width, height] = [Math.round((w + 2 * margin) * perMm), Math.round((h + 2 * margin) * perMm)]
  const warp = waves(page, placement.warpMm ?? 0, placement.seed ?? 1)
  return {
    width, height,
    toPicture: (pageMm) => {
      const [px, py] = warp(pageMm)
      const x = (px - page.widthMm / 2) * (placement.mirrored ? -1 : 1)
      const y = py - page.heightMm / 2
      return [width / 2 + perMm * (cos * x - sin * y), height / 2 + perMm * (sin * x + cos * y)]
    },
  }
}

export interface PhonePlacement {
  width: number
  height: number
  /** Share of the frame's width or height that the page fills. */
  filled: number
  /** The camera's tilt about the page's x and y axes, and its roll. */
  tiltXDegrees: number
  tiltYDegrees: number
  rollDegrees: number
  /** Radial distortion at the frame's corner (−0.02 = 2 % barrel). */
  distortion?: number
  warpMm?: number
  mirrored?: boolean
  seed?: number
}

/** A page seen by a phone: a pinhole at a distance of about 1.4 page widths, tilted, with a little radial distortion. */
export function phone(page: PageSize, placement: PhonePlacement): Camera {
  const { width, height, filled } = placement
  const [ax, ay, roll] = [placement.tiltXDegrees, placement.tiltYDegrees, placement.rollDegrees].map(d => d * Math.PI / 180) as [number, number, number]
  const distance = 1.4 * Math.max(page.widthMm, page.heightMm)
  const focal = filled * distance * Math.min(width / page.widthMm, height / page.heightMm)
  const corner = Math.hypot(width, height) / 2
  const warp = waves(page, placement.warpMm ?? 0, placement.seed ?? 1)
  return {
    width, height,
    toPicture: (pageMm) => {
      const [px, py] = warp(pageMm)
      const [x0, y0] = [(px - page.widthMm / 2) * (placement.mirrored ? -1 : 1), py - page.heightMm / 2]
      const [x1, y1] = [Math.cos(roll) * x0 - Math.sin(roll) * y0, Math.sin(roll) * x0 + Math.cos(roll) * y0]
      const [y2, z2] = [Math.cos(ax) * y1, Math.sin(ax) * y1]
      const [x3, z3] = [Math.cos(ay) * x1 + Math.sin(ay) * z2, -Math.sin(ay) * x1 + Math.cos(ay) * z2]
      const scale = focal / (distance + z3)
      const [u, v] = [x3 * scale, y2 * scale]
      const radial = 1 + (placement.distortion ?? 0) * (Math.hypot(u, v) / corner) ** 2
      return [width / 2 + u * radial, height / 2 + v * radial]
    },
  }
}

/** A few slow waves, at most `amountMm` each way. */
function waves(page: PageSize, amountMm: number, seed: number): (point: Point) => Point {
  if (amountMm === 0) return point => point
  const random = seededRandom(seed)
  const phases = Array.from({ length: 4 }, () => random.uniform() * 2 * Math.PI)
  return ([x, y]) => {
    const [u, v] = [x / page.widthMm * Math.PI, y / page.heightMm * Math.PI]
    return [
      x + amountMm / 2 * (Math.sin(u + phases[0]!) + Math.sin(v + phases[1]!)),
      y + amountMm / 2 * (Math.sin(v + phases[2]!) + Math.sin(u + phases[3]!)),
    ]
  }
}
