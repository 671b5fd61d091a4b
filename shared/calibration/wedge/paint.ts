import { ComputeError } from '../../errors'
import { pixelsFromMm } from '../../sheet/pixels'
import { markerCodes, markerModules, isInkModule } from './marker-codes'
import type { RectMm, Ruler, WedgePage } from './page'
import { rect } from './page'
import { snapWedgePage } from './snap'

/** Ink levels of a page as it reads, by rows: 0 clear … 255 full ink, level = code / 255. */
export interface LevelRaster { widthPx: number, heightPx: number, pixelsPerInch: number, codes: Uint8Array }

const fullInk = 255
/** Width of the foil square's outline and of a ruler's ticks, mm. */
const lineMm = 0.25

/**
 * Paints a wedge's page as ink levels, clear film where nothing stands. `levels` (0 … 1) go into the patches in order,
 * `modules` (by rows, truthy = dark) into the code's symbol; text is left to `stampCoverage`. Memory: one byte a pixel.
 * @throws ComputeError `invalid_input` when the numbers of levels or modules do not fit the page.
 */
export function paintWedge(wedge: WedgePage, levels: ArrayLike<number>, modules: ArrayLike<number> | null, pixelsPerInch: number): LevelRaster {
  const page = wedge.pixelsPerInch === pixelsPerInch ? wedge : snapWedgePage(wedge, pixelsPerInch)
  if (levels.length !== page.patches.length) throw new ComputeError('invalid_input', `This page has ${page.patches.length} patches, not ${levels.length}.`)
  const [widthPx, heightPx] = [pixelsFromMm(page.widthMm, pixelsPerInch), pixelsFromMm(page.heightMm, pixelsPerInch)]
  const raster: LevelRaster = { widthPx, heightPx, pixelsPerInch, codes: new Uint8Array(widthPx * heightPx) }
  for (const { place, ink } of page.grounds) fill(raster, place, ink === 'full' ? fullInk : 0)
  page.patches.forEach((patch, i) => fill(raster, patch, Math.round(fullInk * levels[i]!)))
  for (const { pad, clear } of page.islands) {
    fill(raster, pad, fullInk)
    fill(raster, clear, 0)
  }
  for (const marker of page.markers) {
    fill(raster, marker.fullInk, fullInk)
    fillGrid(raster, marker.place, markerModules, (row, column) => isInkModule(markerCodes[marker.id]!, row, column) ? fullInk : 0)
  }
  fill(raster, page.writeIn, fullInk)
  page.rulers.forEach(ruler => paintRuler(raster, ruler))
  outline(raster, page.diagnostics.foil)
  if (modules) paintIdentity(raster, page, modules)
  return raster
}

function paintIdentity(raster: LevelRaster, { identity: { pad, symbol, moduleCount } }: WedgePage, modules: ArrayLike<number>): void {
  if (modules.length !== moduleCount ** 2) throw new ComputeError('invalid_input', `The code takes ${moduleCount} × ${moduleCount} modules, not ${modules.length} in all.`)
  fill(raster, pad, fullInk)
  fillGrid(raster, symbol, moduleCount, (row, column) => modules[row * moduleCount + column] ? 0 : fullInk)
}

/** Fills a rectangle with one code; parts beyond the page are left out. */
function fill({ widthPx, heightPx, pixelsPerInch, codes }: LevelRaster, { xMm, yMm, widthMm, heightMm }: RectMm, code: number): void {
  const [x0, x1] = [pixelsFromMm(xMm, pixelsPerInch), Math.min(widthPx, pixelsFromMm(xMm + widthMm, pixelsPerInch))]
  const [y0, y1] = [pixelsFromMm(yMm, pixelsPerInch), Math.min(heightPx, pixelsFromMm(yMm + heightMm, pixelsPerInch))]
  for (let y = y0; y < y1; y++) codes.fill(code, y * widthPx + x0, y * widthPx + x1)
}

/** Neighbouring cells share their edges, whatever these are rounded to. */
function fillGrid(raster: LevelRaster, place: RectMm, count: number, codeAt: (row: number, column: number) => number): void {
  const edges = (fromMm: number, lengthMm: number): number[] => Array.from({ length: count + 1 }, (_, i) => pixelsFromMm(fromMm + lengthMm * i / count, raster.pixelsPerInch))
  const [across, down] = [edges(place.xMm, place.widthMm), edges(place.yMm, place.heightMm)]
  for (let row = 0; row < count; row++) {
    for (let y = down[row]!; y < down[row + 1]!; y++) {
      for (let column = 0; column < count; column++) raster.codes.fill(codeAt(row, column), y * raster.widthPx + across[column]!, y * raster.widthPx + across[column + 1]!)
    }
  }
}

function paintRuler(raster: LevelRaster, { axis, place, lengthMm }: Ruler): void {
  for (let mm = 0; mm <= lengthMm; mm++) {
    const tickMm = mm % 10 === 0 ? 3.5 : mm % 5 === 0 ? 2.5 : 1.5
    const [x, y] = [place.xMm + (axis === 'x' ? mm : 0), place.yMm + (axis === 'y' ? mm : 0)]
    fill(raster, axis === 'x' ? rect(x, y, lineMm, tickMm) : rect(x, y, tickMm, lineMm), fullInk)
  }
}

function outline(raster: LevelRaster, { xMm, yMm, widthMm, heightMm }: RectMm): void {
  for (const y of [yMm, yMm + heightMm - lineMm]) fill(raster, rect(xMm, y, widthMm, lineMm), fullInk)
  for (const x of [xMm, xMm + widthMm - lineMm]) fill(raster, rect(x, yMm, lineMm, heightMm), fullInk)
}

/**
 * Lays text (coverage 0 … 255 by rows, made by whoever has fonts) onto the page, its top-left corner at the place's:
 * the level moves towards full ink or towards clear by the coverage. What reaches beyond the place is cut off.
 */
export function stampCoverage(raster: LevelRaster, place: RectMm, ink: 'full' | 'clear', text: { widthPx: number, heightPx: number, coverage: Uint8Array }): void {
  const { widthPx, heightPx, pixelsPerInch, codes } = raster
  const [x0, y0] = [pixelsFromMm(place.xMm, pixelsPerInch), pixelsFromMm(place.yMm, pixelsPerInch)]
  const w = Math.min(text.widthPx, pixelsFromMm(place.widthMm, pixelsPerInch), widthPx - x0)
  const h = Math.min(text.heightPx, pixelsFromMm(place.heightMm, pixelsPerInch), heightPx - y0)
  const target = ink === 'full' ? fullInk : 0
  for (let y = 0; y < h; y++) {
    for (let x = 0; x < w; x++) {
      const at = (y0 + y) * widthPx + x0 + x
      codes[at] = Math.round(codes[at]! + (target - codes[at]!) * text.coverage[y * text.widthPx + x]! / 255)
    }
  }
}
