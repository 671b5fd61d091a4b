import { execFileSync } from 'node:child_process'
import { existsSync } from 'node:fs'
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { gzipSync } from 'node:zlib'
import type { Browser, CDPSession, Page, Response } from 'playwright-core'
import { measured, notMeasured, type Measure, type Suite } from './suite'

// What the pages cost the reader's own machine: one move of a slider in the editor, and the first page.

const chromiumPath = process.env.CHROMIUM ?? '/usr/bin/chromium'
const photographPath = '/usr/share/libjxl-testdata/jxl/flower/flower.png'
const flags = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']
const moves = 60
/** long enough for the worker to draw, shorter than the pause after which a change is kept */
const betweenMovesMilliseconds = 200

const goals = {
  script: ['one slider change, script on the page\'s thread, p95', 'ms', 12],
  task: ['one slider change, longest task', 'ms', 50],
  requests: ['requests while the slider moves, besides keeping it', 'requests', 0],
  size: ['first page, script gzipped', 'kB', 150],
  paint: ['first page, first contentful paint, median of 5', 'ms', 1000],
} as const

export const run: Suite = async function* ({ folder, startService }) {
  const missing = [chromiumPath, photographPath].find(path => !existsSync(path))
  if (missing) {
    for (const [name, unit, goal] of Object.values(goals)) yield notMeasured(name, unit, goal, `${missing} is not there`)
    return
  }
  const { chromium } = await import('playwright-core')
  const service = await startService({ RATE_LIMITS: 'false' })
  const browser = await chromium.launch({ executablePath: chromiumPath, args: flags })
  try {
    yield* firstPage(browser, service.address)
    yield* sliderMoves(browser, service.address, folder)
  }
  finally {
    await browser.close()
    await service.stop()
  }
}

const row = (key: keyof typeof goals, value: number): Measure => measured(goals[key][0], value, goals[key][1], goals[key][2])

async function* firstPage(browser: Browser, address: string): AsyncIterable<Measure> {
  const paints: number[] = []
  let bytes = 0
  for (let round = 0; round < 5; round++) {
    const context = await browser.newContext()
    const page = await context.newPage()
    const scripts: Response[] = []
    page.on('response', response => response.request().resourceType() === 'script' && scripts.push(response))
    await page.goto(address, { waitUntil: 'networkidle' })
    paints.push(await page.evaluate(() => performance.getEntriesByName('first-contentful-paint')[0]!.startTime))
    bytes = (await Promise.all([...scripts].map(script => script.body()))).reduce((sum, script) => sum + gzipSync(script).length, 0)
    await context.close()
  }
  yield row('size', bytes / 1000)
  yield row('paint', paints.sort((a, b) => a - b)[2]!)
}

async function* sliderMoves(browser: Browser, address: string, folder: string): AsyncIterable<Measure> {
  const context = await browser.newContext({ baseURL: address, viewport: { width: 1440, height: 900 } })
  const page = await context.newPage()
  await page.goto(await editorAddress(page, folder))
  await page.getByText(/forecast, L\*/).filter({ visible: true }).waitFor()
  await page.getByRole('slider', { name: 'Contrast' }).first().focus()
  await page.waitForTimeout(1000)
  await page.evaluate(() => {
    const tasks: number[] = (globalThis as unknown as { tasks: number[] }).tasks = []
    new PerformanceObserver(list => tasks.push(...list.getEntries().map(entry => entry.duration))).observe({ type: 'longtask' })
  })
  const metrics = await context.newCDPSession(page)
  // The thread's own time, so that what else the machine does is not counted.
  await metrics.send('Performance.enable', { timeDomain: 'threadTicks' })
  const times: number[] = []
  const allTasks: number[] = []
  let requests = 0
  // A change that rests for half a second is kept, which is a request of its own.
  page.on('request', request => requests += Number(request.method() !== 'PATCH'))
  for (let move = 0; move < moves; move++) {
    const before = await spentSeconds(metrics)
    await page.keyboard.press(move % 20 < 10 ? 'ArrowRight' : 'ArrowLeft')
    await page.waitForTimeout(betweenMovesMilliseconds)
    const after = await spentSeconds(metrics)
    times.push(1000 * (after.script - before.script))
    allTasks.push(1000 * (after.tasks - before.tasks))
  }
  const seen = requests
  const tasks = await page.evaluate(() => (globalThis as unknown as { tasks: number[] }).tasks)
  yield row('script', times.sort((a, b) => a - b)[Math.ceil(0.95 * times.length) - 1]!)
  // The browser names tasks from 50 ms on. Without any, all tasks of one move together bound the longest from above.
  yield tasks.length > 0 ? row('task', Math.max(...tasks)) : { ...row('task', Math.min(50, Math.max(...allTasks))), reason: 'an upper bound: the browser names no task of 50 ms' }
  yield row('requests', seen)
}

async function spentSeconds(session: CDPSession): Promise<{ script: number, tasks: number }> {
  const { metrics } = await session.send('Performance.getMetrics')
  const of = (name: string) => metrics.find(metric => metric.name === name)!.value
  return { script: of('ScriptDuration'), tasks: of('TaskDuration') }
}

/** A new studio with one photograph and one negative of it. */
async function editorAddress(page: Page, folder: string): Promise<string> {
  const path = join(folder, 'flower.jpg')
  execFileSync('convert', [photographPath, '-resize', '4000x3000^', '-gravity', 'center', '-extent', '4000x3000', '-quality', '90', path])
  const { request } = page.context()
  const { studio } = await (await request.post('/api/auth/register', { data: { name: 'Ines Marlow', email: 'preview@ropeworks.example', password: 'slow water, long rope' } })).json()
  const root = `/api/studios/${studio.slug}`
  const { items: [photo] } = await (await request.post(`${root}/photos`, { multipart: { file: { name: 'flower.jpg', mimeType: 'image/jpeg', buffer: await readFile(path) } } })).json()
  const negative = await (await request.post(`${root}/negatives`, { data: { photoId: photo.id, process: 'cyanotype', size: { widthMm: 240, heightMm: 180 } } })).json()
  return `/s/${studio.slug}/negatives/${negative.id}`
}
