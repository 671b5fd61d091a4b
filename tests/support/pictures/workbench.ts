import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, vi } from 'vitest'
import type { FilmOrder, WedgeFilmOrder } from '../../../server/image/protocol'
import { makeFilm } from '../../../server/image/work/film'
import { makeWedgeFilm } from '../../../server/image/work/wedge-film'

// Programs of other makers are started by these tests; on a busy machine that takes a while.
vi.setConfig({ testTimeout: 60_000 })

/** A folder of the test file's own, removed afterwards. */
export function openWorkbench() {
  const folder = mkdtempSync(join(tmpdir(), 'emulside-picture-'))
  afterAll(() => rmSync(folder, { recursive: true, force: true }))
  let files = 0
  const fresh = (name = 'file') => join(folder, `${++files}-${name}`)
  return {
    fresh,
    keep(bytes: Buffer, name?: string) {
      const path = fresh(name)
      writeFileSync(path, bytes)
      return path
    },
    /** makes a film and gives its path */
    async film(path: string, order: FilmOrder, renderKey = 'key') {
      const target = fresh(`film.${order.format}`)
      const result = await makeFilm({ path, target, order, renderKey }, () => {})
      return { target, ...result }
    },
    /** makes a wedge's film and gives its path */
    async wedgeFilm(order: WedgeFilmOrder, renderKey = 'key') {
      const target = fresh(`wedge.${order.format}`)
      const result = await makeWedgeFilm({ target, order, renderKey }, () => {})
      return { target, ...result }
    },
    /** 16-bit samples of a film file, read by libvips' own program */
    vipsSamples(path: string): Uint16Array {
      const raw = fresh('samples.raw')
      execFileSync('vips', ['rawsave', path, raw])
      return words(readFileSync(raw))
    },
    /** 16-bit samples of a film file, read by ImageMagick */
    magickSamples(path: string, kind: 'gray' | 'rgb' = 'gray'): Uint16Array {
      return words(execFileSync('convert', [path, '-depth', '16', '-endian', 'LSB', `${kind}:-`], { maxBuffer: 1 << 30 }))
    },
  }
}

const words = (bytes: Buffer) => new Uint16Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length))

export const wholePicture = { quarterTurns: 0, straightenDegrees: 0, crop: { x: 0, y: 0, width: 1, height: 1 } }
export const neutral = { mix: { red: 1, green: 1, blue: 1 }, blackPoint: 0, whitePoint: 1, midtone: 0, contrast: 0 }
/** A response by which level = tone, so that film code = 65535 − tone code: it shows the tone plane as it is. */
export const plainResponse = Array.from({ length: 1025 }, (_, i) => 100 * i / 1024)

/** An order for a film of these pixels, unmirrored and without margins, that shows the tone plane. */
export function filmOrder(widthPixels: number, heightPixels: number, changes: Partial<FilmOrder> = {}): FilmOrder {
  const pixelsPerInch = changes.pixelsPerInch ?? 360
  return {
    format: 'tiff', geometry: wholePicture, tone: { adjustments: neutral, aim: 'even-lightness', response: plainResponse },
    picture: { widthPixels, heightPixels }, margin: { pixels: 0, kind: 'clear' }, pixelsPerInch, mirror: false, inkColor: '#000000',
    marks: { ruler: false, label: false, labelText: 'Test film' },
    filmMm: { width: widthPixels * 25.4 / pixelsPerInch, height: heightPixels * 25.4 / pixelsPerInch },
    ...changes,
  }
}

/** Tone codes from a film made with `plainResponse`. */
export const tonesFrom = (samples: Uint16Array) => samples.map(code => 65535 - code)
