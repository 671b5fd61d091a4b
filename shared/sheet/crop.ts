import { requireNumber } from '../tone/domain'

export interface Size { width: number, height: number }
/** Fractions of the frame: the turned, straightened picture's bounding rectangle. */
export interface Crop { x: number, y: number, width: number, height: number }

/** How the upright picture is turned: whole quarter turns first, then a small angle; both clockwise when positive. */
export interface Turn { quarterTurns: number, straightenDegrees: number }

/** The picture after its quarter turns. */
export const afterQuarterTurns = ({ width, height }: Size, quarterTurns: number): Size =>
  quarterTurns % 2 === 0 ? { width, height } : { width: height, height: width }

/**
 * The frame that crops refer to: the bounding rectangle of the picture after quarter turns and straightening, in the
 * picture's own unit. Straightening −45 … 45 degrees.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function straightenedFrame(picture: Size, { quarterTurns, straightenDegrees }: Turn): Size {
  const { width, height } = afterQuarterTurns(picture, quarterTurns)
  const { cos, sin } = turnOf(straightenDegrees)
  return { width: width * cos + height * sin, height: width * sin + height * cos }
}

/**
 * The largest upright rectangle of a shape (width / height) about the middle of the straightened picture that has no empty
 * corner, as a crop of the frame. Without straightening: the largest centred crop of that shape.
 * @throws ComputeError `invalid_input` for sizes that are not positive or an angle outside −45 … 45 degrees.
 */
export function largestCrop(picture: Size, turn: Turn, shape: number): Crop {
  requireNumber(shape, 'A shape', 1e-4, 1e4)
  const { width, height } = afterQuarterTurns(picture, turn.quarterTurns)
  requireNumber(Math.min(width, height), 'A side', 1e-9, 1e9)
  const { cos, sin } = turnOf(turn.straightenDegrees)
  // A corner (w/2, h/2) of the crop, turned back, must lie inside the picture: w·cos + h·sin ≤ width, w·sin + h·cos ≤ height.
  const cropWidth = Math.min(width / (cos + sin / shape), height / (sin + cos / shape))
  return centred({ width: cropWidth, height: cropWidth / shape }, straightenedFrame(picture, turn))
}

/** The crop without an empty corner that has the largest area of any shape; about the middle. */
export function largestCropOfAnyShape(picture: Size, turn: Turn): Crop {
  const { width, height } = afterQuarterTurns(picture, turn.quarterTurns)
  const { cos, sin } = turnOf(turn.straightenDegrees)
  const [long, short] = [Math.max(width, height), Math.min(width, height)]
  const frame = straightenedFrame(picture, turn)
  if (short <= 2 * sin * cos * long) {
    // Two corners touch the long sides: half the short side over sine and cosine.
    const [along, across] = [short / 2 / sin, short / 2 / cos]
    return centred(width >= height ? { width: along, height: across } : { width: across, height: along }, frame)
  }
  const double = cos * cos - sin * sin
  return centred({ width: (width * cos - height * sin) / double, height: (height * cos - width * sin) / double }, frame)
}

/**
 * Whether a crop shows picture everywhere, no empty corner, to within a relative 10⁻⁹ of the frame.
 */
export function isInsidePicture(picture: Size, turn: Turn, crop: Crop): boolean {
  const { width, height } = afterQuarterTurns(picture, turn.quarterTurns)
  const frame = straightenedFrame(picture, turn)
  const angle = turn.straightenDegrees * Math.PI / 180
  const [cos, sin] = [Math.cos(angle), Math.sin(angle)]
  const slack = 1e-9 * (frame.width + frame.height)
  return [crop.x, crop.x + crop.width].every(x => [crop.y, crop.y + crop.height].every((y) => {
    const [dx, dy] = [(x - 0.5) * frame.width, (y - 0.5) * frame.height]
    return Math.abs(dx * cos + dy * sin) <= width / 2 + slack && Math.abs(dy * cos - dx * sin) <= height / 2 + slack
  }))
}

function centred({ width, height }: Size, frame: Size): Crop {
  const [w, h] = [Math.min(1, width / frame.width), Math.min(1, height / frame.height)]
  return { x: (1 - w) / 2, y: (1 - h) / 2, width: w, height: h }
}

function turnOf(straightenDegrees: number): { cos: number, sin: number } {
  const angle = Math.abs(requireNumber(straightenDegrees, 'Straightening', -45, 45)) * Math.PI / 180
  return { cos: Math.cos(angle), sin: Math.sin(angle) }
}
