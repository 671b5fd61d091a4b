import type { Process } from '#shared/schemas/benches'
import type { Aim } from '#shared/schemas/curves'
import type { Adjustments } from '#shared/schemas/negatives'
import { adjustedTones } from '#shared/tone/adjustments'
import { densityFromLightness } from '#shared/tone/density'
import { buildForecastTable, buildLevelTable } from '#shared/tone/levels'
import { tonalLosses, toneHistogram, type TonalLosses } from '#shared/tone/losses'
import type { LabPoint } from '#shared/tone/looks'
import { mixToTonePlane, mixWeights } from '#shared/tone/mix'
import { buildPaletteTable, lightTableLightnesses } from '#shared/tone/palettes'
import { stateLook, type TriptychState } from '#shared/tone/triptych'

/** All that the three states are made from, besides the picture. */
export interface PreviewOrder {
  adjustments: Adjustments
  aim: Aim
  /** print lightness at 1025 equal steps of ink level */
  response: number[]
  process: Process
  /** the bench’s own colours, where its print has been scanned; else the process’s */
  colourPath: LabPoint[] | null
  mirror: boolean
  /** the dim room: amber, blue zero */
  dim: boolean
}

export interface Reading { lightness: number, level: number, printLightness: number, printDensity: number }
export interface Summary {
  losses: TonalLosses
  /** L* of the adjusted photo's darkest and lightest tones (1 in 1000 left out at each end), and the bench's own reach */
  photoRange: [number, number]
  printRange: [number, number]
  /** 21 even steps of the photo's tones as each state shows them; on mirrored film they run the other way */
  strips: Record<TriptychState, string[]>
}

const greatestCode = 65535
const stripCodes = Array.from({ length: 21 }, (_, step) => Math.round(step / 20 * greatestCode))

/**
 * Photo, film and print of one picture, from working-space channels by the same functions as the server's render.
 * Channels are interleaved 16-bit codes; pictures come out as canvas pixels.
 */
export class PreviewEngine {
  private channels = new Uint16Array(0)
  private plane = new Uint16Array(0)
  private histogram: Uint32Array = new Uint32Array(0)
  private mixKey = ''
  private order?: PreviewOrder
  private lightness: Float64Array = new Float64Array(0)
  private levels: Float64Array = new Float64Array(0)
  private forecast: Float64Array = new Float64Array(0)
  private tables?: Record<TriptychState, Uint32Array>
  width = 0
  height = 0

  setSource(channels: Uint16Array, width: number, height: number): void {
    Object.assign(this, { channels, width, height, plane: new Uint16Array(width * height), mixKey: '' })
    this.mix()
  }

  setOrder(order: PreviewOrder): void {
    this.order = order
    const settings = { adjustments: order.adjustments, aim: order.aim, response: order.response }
    const tones = adjustedTones(order.adjustments)
    this.lightness = tones.map(tone => 100 * tone)
    this.levels = buildLevelTable(settings, tones)
    this.forecast = buildForecastTable(settings, this.levels)
    const table = (state: TriptychState, lightness: Float64Array) => buildPaletteTable(stateLook(state, order.dim ? 'dim' : order.colourPath ?? order.process), lightness)
    this.tables = { photo: table('photo', this.lightness), film: table('film', lightTableLightnesses(this.levels)), print: table('print', this.forecast) }
    this.mix()
  }

  get isReady(): boolean {
    return this.tables !== undefined && this.width > 0
  }

  /** Writes one state's pixels; the film's lie mirrored where the process wants it. */
  draw(state: TriptychState, pixels: Uint32Array): void {
    const table = this.tables![state]
    const { plane, width } = this
    if (state !== 'film' || !this.order!.mirror) {
      for (let place = 0; place < plane.length; place++) pixels[place] = table[plane[place]!]!
      return
    }
    for (let row = 0; row < plane.length; row += width) {
      for (let x = 0; x < width; x++) pixels[row + x] = table[plane[row + width - 1 - x]!]!
    }
  }

  /** What stands at a spot, in fractions of the print from its top left. */
  read(x: number, y: number): Reading {
    const column = Math.min(this.width - 1, Math.floor(x * this.width))
    const row = Math.min(this.height - 1, Math.floor(y * this.height))
    const code = this.plane[row * this.width + column]!
    const printLightness = this.forecast[code]!
    return { lightness: this.lightness[code]!, level: this.levels[code]!, printLightness, printDensity: densityFromLightness(Math.max(0.1, printLightness)) }
  }

  summary(): Summary {
    const { response } = this.order!
    const printRange: [number, number] = [response[0]!, response.at(-1)!]
    const [low, high] = codeRange(this.histogram)
    const strip = (state: TriptychState) => stripCodes.map(code => cssColour(this.tables![state][code]!))
    return {
      losses: tonalLosses(this.histogram, this.forecast, ...printRange),
      photoRange: [this.lightness[low]!, this.lightness[high]!],
      printRange,
      strips: { photo: strip('photo'), film: this.order!.mirror ? strip('film').reverse() : strip('film'), print: strip('print') },
    }
  }

  /** Tones 0 … 1 of the unadjusted picture beyond which one pixel in a thousand lies. */
  pictureEnds(): [low: number, high: number] {
    const [low, high] = codeRange(this.histogram)
    return [low / greatestCode, high / greatestCode]
  }

  private mix(): void {
    if (!this.order || this.width === 0) return
    const key = JSON.stringify(this.order.adjustments.mix)
    if (key === this.mixKey) return
    mixToTonePlane(this.channels, mixWeights(this.order.adjustments.mix), this.plane)
    this.histogram = toneHistogram(this.plane)
    this.mixKey = key
  }
}

/** The picture's own ends: black and white point where one pixel in a thousand lies beyond. */
export function codeRange(histogram: Uint32Array, leftOut = 0.001): [low: number, high: number] {
  const all = histogram.reduce((sum, count) => sum + count, 0)
  const passing = (start: number, step: 1 | -1): number => {
    let [code, seen] = [start, 0]
    while (code > 0 - step && code < histogram.length && (seen += histogram[code]!) <= leftOut * all) code += step
    return Math.min(greatestCode, Math.max(0, code))
  }
  return all === 0 ? [0, greatestCode] : [passing(0, 1), passing(greatestCode, -1)]
}

const cssColour = (pixel: number): string => `rgb(${pixel & 255} ${(pixel >> 8) & 255} ${(pixel >> 16) & 255})`
