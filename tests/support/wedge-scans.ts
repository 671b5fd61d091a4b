import { execFile } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { promisify } from 'node:util'
import sharp from 'sharp'
import type { ScanPicture } from '../../shared/calibration/reading/picture'
import type { WedgePage } from '../../shared/calibration/wedge/page'
import { paintWedge } from '../../shared/calibration/wedge/paint'
import { scatteredGrids, scatteredPage } from '../../shared/calibration/wedge/scattered-page'
import { snapWedgePage } from '../../shared/calibration/wedge/snap'
import { codeModules } from './scan-simulator/code'
import { flatbed, type FlatbedPlacement } from './scan-simulator/cameras'
import { type PrintModel, type SimulatedPrint, simulatePrint } from './scan-simulator/print'
import { responseOf } from './scan-simulator/scenes'
import { type Optics, takePicture } from './scan-simulator/take-picture'
import type { InStudio } from './negatives'

/** A wedge's chart: where its parts stand, what stands in its patches, what names it. */
export interface Chart { page: WedgePage, levels: number[], code: string }

/** A scattered wedge's chart from its record over HTTP. */
export function chartOfRecord(wedge: { code: string, pixelsPerInch: number, patches: { level: number }[] }): Chart {
  const grid = scatteredGrids.find(({ columns, rows }) => columns * rows === wedge.patches.length)!
  return { code: wedge.code, page: snapWedgePage(scatteredPage(grid), wedge.pixelsPerInch), levels: wedge.patches.map(({ level }) => level) }
}

/** How the simulated paper answers. */
export const printTone = responseOf(18, 94, 0.8)

/** A print of a wedge's film, with a coating of its own by its seed. */
export const printOfChart = ({ page, levels, code }: Chart, model: Partial<PrintModel> = {}): SimulatedPrint =>
  simulatePrint(paintWedge(page, levels, codeModules(code), page.pixelsPerInch!), { lightnessOf: printTone, seed: 1, gradientLightness: 1, mottleLightness: 1, textureLightness: 2, ...model })

export const scanOf = (print: SimulatedPrint, { page }: Chart, placement: Partial<FlatbedPlacement> = {}, optics: Optics = {}): ScanPicture =>
  takePicture(print, flatbed(page, { pixelsPerInch: 200, skewDegrees: 1.5, warpMm: 0.3, ...placement }), { blurPx: 0.6, noiseCodes: 0.7, ...optics })

export type ScanFormat = 'jpeg' | 'png' | 'tiff' | 'tiff16' | 'heic'

/** A picture as a file. HEIC is written by Debian's heif-enc. */
export async function scanFile({ codes, width, height }: ScanPicture, format: ScanFormat = 'jpeg'): Promise<Buffer> {
  const picture = sharp(Buffer.from(codes.buffer, codes.byteOffset, codes.byteLength), { raw: { width, height, channels: 3 } })
  switch (format) {
    case 'jpeg': return picture.jpeg({ quality: 93, chromaSubsampling: '4:4:4' }).toBuffer()
    case 'png': return picture.png().toBuffer()
    case 'tiff': return picture.tiff({ compression: 'lzw', tile: true }).toBuffer()
    case 'tiff16': return picture.toColourspace('rgb16').tiff({ compression: 'deflate', predictor: 'horizontal' }).toBuffer()
    case 'heic': return heicFile(await picture.png().toBuffer())
  }
}

async function heicFile(png: Buffer): Promise<Buffer> {
  const folder = mkdtempSync(join(tmpdir(), 'heic-'))
  try {
    writeFileSync(join(folder, 'scan.png'), png)
    await promisify(execFile)('heif-enc', ['-q', '92', '-o', join(folder, 'scan.heic'), join(folder, 'scan.png')])
    return readFileSync(join(folder, 'scan.heic'))
  }
  finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

/** The multipart body of a scan with its fields. */
export function scanForm(bytes: Uint8Array, fields: Record<string, string> = {}, fileName = 'wedge print.jpg'): FormData {
  const form = new FormData()
  for (const [name, value] of Object.entries(fields)) form.append(name, value)
  form.append('scan', new Blob([new Uint8Array(bytes)]), fileName)
  return form
}

/** A bench with a small scattered wedge on it. */
export async function newWedge({ agent, root }: InStudio, bench: Record<string, unknown> = {}, page = { widthMm: 150, heightMm: 115 }) {
  const made = await agent.post(`${root}/benches`, { name: 'Window bench', process: 'cyanotype', ...bench })
  const wedge = await agent.post(`${root}/benches/${made.body.id}/wedges`, { page })
  if (wedge.status !== 201) throw new Error(`Laying out a wedge answered ${wedge.status}: ${wedge.text}`)
  return { benchId: made.body.id as string, wedgeId: wedge.body.id as string, chart: chartOfRecord(wedge.body) }
}
