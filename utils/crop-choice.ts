import { isInsidePicture, largestCrop, straightenedFrame, type Crop, type Size, type Turn } from '#shared/sheet/crop'

/** A crop as people move it: its middle in fractions of the frame, and its size against the largest that fits. */
export interface CropChoice { x: number, y: number, share: number }

/** The crop of a print's shape nearest to what is wanted that shows picture everywhere: it slides back towards the middle. */
export function cropOf(picture: Size, turn: Turn, shape: number, { x, y, share }: CropChoice): Crop {
  const largest = largestCrop(picture, turn, shape)
  const [width, height] = [largest.width * share, largest.height * share]
  const at = (part: number): Crop => ({ x: 0.5 + (x - 0.5) * part - width / 2, y: 0.5 + (y - 0.5) * part - height / 2, width, height })
  if (isInsidePicture(picture, turn, at(1))) return clean(at(1))
  let [inside, outside] = [0, 1]
  for (let i = 0; i < 24; i++) {
    const middle = (inside + outside) / 2
    if (isInsidePicture(picture, turn, at(middle))) inside = middle
    else outside = middle
  }
  return clean(at(inside))
}

export function choiceOf(picture: Size, turn: Turn, shape: number, crop: Crop): CropChoice {
  const largest = largestCrop(picture, turn, shape)
  return { x: crop.x + crop.width / 2, y: crop.y + crop.height / 2, share: Math.min(1, crop.width / largest.width) }
}

/** A picture's share of the print's sides when it is shown whole within it. */
export function innerOf(picture: Size, turn: Turn, crop: Crop, printShape: number): { width: number, height: number } {
  const frame = straightenedFrame(picture, turn)
  const shape = (crop.width * frame.width) / (crop.height * frame.height)
  return shape > printShape ? { width: 1, height: printShape / shape } : { width: shape / printShape, height: 1 }
}

const clean = ({ x, y, width, height }: Crop): Crop => ({ x: Math.max(0, Math.min(1 - width, x)), y: Math.max(0, Math.min(1 - height, y)), width, height })
