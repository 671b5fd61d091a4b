import { spawnSync } from 'node:child_process'
import { existsSync, mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { chromium, type Browser, type Page } from 'playwright-core'
import { afterAll, beforeAll } from 'vitest'
import { inData } from '../../server/cli/paths.mjs'
import { application, type Agent } from './studio'

export type Theme = 'light' | 'dim'
export const phone = { width: 390, height: 844 }
export const desk = { width: 1440, height: 900 }

const quietFlags = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']
let browser: Browser

/** One browser for a test file. */
export function useBrowser() {
  beforeAll(async () => {
    browser = await chromium.launch({ executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium', args: quietFlags })
  })
  afterAll(() => browser.close())
}

interface Settings { size?: { width: number, height: number }, theme?: Theme, agent?: Agent, reducedMotion?: boolean }

/** A page in a context of its own, signed in as `agent`; remembers requests to other machines and errors of the page. */
export async function newPage({ size = desk, theme = 'light', agent, reducedMotion = false }: Settings = {}) {
  const { address } = application()
  const context = await browser.newContext({
    baseURL: address, viewport: size, hasTouch: size.width < 720, isMobile: size.width < 720, acceptDownloads: true, reducedMotion: reducedMotion ? 'reduce' : 'no-preference',
  })
  await context.addInitScript(chosen => localStorage.setItem('emulside-theme', chosen), theme)
  const cookies = agent?.cookieHeader().split('; ').map(pair => ({ name: pair.slice(0, pair.indexOf('=')), value: pair.slice(pair.indexOf('=') + 1), url: address }))
  if (cookies) await context.addCookies(cookies)
  const page = await context.newPage()
  const elsewhere: string[] = []
  const errors: string[] = []
  context.on('request', request => !request.url().startsWith(address) && !/^(data|blob):/.test(request.url()) && elsewhere.push(request.url()))
  page.on('pageerror', error => errors.push(error.message))
  page.on('response', answer => answer.status() >= 400 && answer.request().resourceType() === 'image' && errors.push(`${answer.status()} ${answer.url()}`))
  page.setDefaultTimeout(45_000)
  return { page, context, elsewhere, errors }
}

/** Reads what a canvas shows, also one that a worker draws: RGBA bytes. */
export async function canvasPixels(page: Page, place: number): Promise<{ width: number, height: number, pixels: Buffer }> {
  const { width, height, url } = await page.evaluate(async (index) => {
    const shown = document.querySelectorAll('canvas')[index]!
    const copy = new OffscreenCanvas(shown.width, shown.height)
    const context = copy.getContext('2d')!
    context.drawImage(shown, 0, 0)
    const { data } = context.getImageData(0, 0, shown.width, shown.height)
    const reader = new FileReader()
    const read = new Promise(resolve => reader.onload = resolve)
    reader.readAsDataURL(new Blob([data]))
    await read
    return { width: shown.width, height: shown.height, url: reader.result as string }
  }, place)
  return { width, height, pixels: Buffer.from(url.slice(url.indexOf(',') + 1), 'base64') }
}

const flower = '/usr/share/libjxl-testdata/jxl/flower/flower.png'

/**
 * A photograph of so many pixels as a JPEG such as phones make: from Debian's libjxl-testdata, cut to 4 : 3 and enlarged
 * by ImageMagick where it is smaller.
 */
export function photograph(width = 4000, height = 3000): string {
  const path = inData('test-pictures', `flower-${width}x${height}.jpg`)
  if (existsSync(path)) return path
  mkdirSync(join(path, '..'), { recursive: true })
  const made = spawnSync('convert', [flower, '-resize', `${width}x${height}^`, '-gravity', 'center', '-extent', `${width}x${height}`, '-quality', '90', path], { encoding: 'utf8' })
  if (made.status !== 0) throw new Error(`The photograph could not be made: ${made.stderr}`)
  return path
}
