import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../../shared/calibration/random'
import type { Crop, Turn } from '../../../shared/sheet/crop'
import { isInsidePicture, largestCrop, largestCropOfAnyShape, straightenedFrame } from '../../../shared/sheet/crop'

const upright: Turn = { quarterTurns: 0, straightenDegrees: 0 }
const photo = { width: 4000, height: 3000 }

function anyTurn(seed: number) {
  const random = seededRandom(seed)
  const picture = { width: 200 + random.below(5000), height: 200 + random.below(5000) }
  return { picture, turn: { quarterTurns: random.below(4), straightenDegrees: 90 * random.uniform() - 45 }, shape: 0.3 + 3 * random.uniform() }
}
const grown = (crop: Crop, by: number): Crop => ({ x: 0.5 - crop.width * by / 2, y: 0.5 - crop.height * by / 2, width: crop.width * by, height: crop.height * by })

describe('the straightened frame', () => {
  it('is the picture itself without turning, its sides swapped by a quarter turn', () => {
    expect(straightenedFrame(photo, upright)).toEqual(photo)
    expect(straightenedFrame(photo, { quarterTurns: 3, straightenDegrees: 0 })).toEqual({ width: 3000, height: 4000 })
  })

  it('bounds the turned picture', () => {
    // By hand: a square turned by 45 degrees stands on its corner, √2 wide.
    const frame = straightenedFrame({ width: 100, height: 100 }, { quarterTurns: 0, straightenDegrees: -45 })
    expect(frame.width).toBeCloseTo(100 * Math.SQRT2, 10)
    expect(frame.height).toBeCloseTo(100 * Math.SQRT2, 10)
  })
})

describe('the largest crop of a shape', () => {
  it('is centred and touches two sides of an upright picture', () => {
    expect(largestCrop(photo, upright, 1)).toEqual({ x: 0.125, y: 0, width: 0.75, height: 1 })
    expect(largestCrop(photo, upright, 4 / 3)).toEqual({ x: 0, y: 0, width: 1, height: 1 })
    expect(largestCrop(photo, { quarterTurns: 1, straightenDegrees: 0 }, 3)).toMatchObject({ x: 0, width: 1 })
  })

  it('has its shape, shows no empty corner, and could not be larger', () => {
    for (let seed = 0; seed < 200; seed++) {
      const { picture, turn, shape } = anyTurn(seed)
      const frame = straightenedFrame(picture, turn)
      const crop = largestCrop(picture, turn, shape)
      expect(crop.width * frame.width / (crop.height * frame.height)).toBeCloseTo(shape, 9)
      expect(isInsidePicture(picture, turn, crop), `seed ${seed}`).toBe(true)
      expect(isInsidePicture(picture, turn, grown(crop, 1.001)), `seed ${seed}`).toBe(false)
    }
  })
})

describe('the largest crop of any shape', () => {
  it('is the whole upright picture, and half of a square on its corner', () => {
    expect(largestCropOfAnyShape(photo, upright)).toEqual({ x: 0, y: 0, width: 1, height: 1 })
    const onCorner = { quarterTurns: 0, straightenDegrees: 45 }
    const { width, height } = largestCropOfAnyShape({ width: 100, height: 100 }, onCorner)
    // By hand: the upright square between the sides' middles, 100/√2 wide in a frame of 100·√2.
    expect([width, height].map(v => Number(v.toFixed(9)))).toEqual([0.5, 0.5])
  })

  it('shows no empty corner and beats the crop of every shape', () => {
    for (let seed = 0; seed < 80; seed++) {
      const { picture, turn } = anyTurn(seed)
      const best = largestCropOfAnyShape(picture, turn)
      expect(isInsidePicture(picture, turn, best), `seed ${seed}`).toBe(true)
      for (let shape = 0.1; shape < 10; shape *= 1.1) {
        const crop = largestCrop(picture, turn, shape)
        if (crop.width * crop.height > best.width * best.height * (1 + 1e-9)) expect.fail(`seed ${seed}, shape ${shape}`)
      }
    }
  })
})

describe('an empty corner', () => {
  it('is seen on the side to which the picture turns', () => {
    const turn = { quarterTurns: 0, straightenDegrees: 10 }
    // Turned clockwise the top edge sinks to the right: the frame's top right corner is empty, its middle is not.
    expect(isInsidePicture(photo, turn, { x: 0.9, y: 0, width: 0.1, height: 0.1 })).toBe(false)
    expect(isInsidePicture(photo, turn, { x: 0.3, y: 0.3, width: 0.4, height: 0.4 })).toBe(true)
    // The picture's own top left corner touches the frame's top at height · sin 10° from the left.
    const touch = 3000 * Math.sin(Math.PI / 18) / straightenedFrame(photo, turn).width
    expect(isInsidePicture(photo, turn, { x: touch, y: 0, width: 1e-12, height: 1e-12 })).toBe(true)
    expect(isInsidePicture(photo, { ...turn, straightenDegrees: -10 }, { x: touch, y: 0, width: 1e-12, height: 1e-12 })).toBe(false)
  })

  it('needs an angle of −45 … 45 degrees and a picture', () => {
    expect(() => largestCrop(photo, { quarterTurns: 0, straightenDegrees: 46 }, 1)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
    expect(() => largestCrop({ width: 0, height: 10 }, upright, 1)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
    expect(() => largestCrop(photo, upright, Number.NaN)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
