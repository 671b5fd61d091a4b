import { execFileSync } from 'node:child_process'
import { writeFileSync } from 'node:fs'
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { expect, it } from 'vitest'
import { canvasPixels, newPage, photograph, useBrowser } from '../support/browser'
import { newFolder } from '../support/house'
import { newStudio } from '../support/studio'

useBrowser()

const adjustments = { mix: { red: 1.4, green: 0.9, blue: 0.6 }, blackPoint: 0.04, whitePoint: 0.95, midtone: 0.2, contrast: 0.3 }

async function newNegative() {
  const { agent, root, studio } = await newStudio()
  const form = new FormData()
  form.append('file', new Blob([await readFile(photograph(1600, 1200))], { type: 'image/jpeg' }), 'flower.jpg')
  const photo = (await agent.call('POST', `${root}/photos`, { body: form })).body.items[0]
  const negative = (await agent.post(`${root}/negatives`, { photoId: photo.id, process: 'cyanotype', size: { widthMm: 160, heightMm: 120 }, adjustments })).body
  return { agent, root, studio, negative }
}

/** A PNG's pixels, decoded by ImageMagick. */
function decode(png: Buffer): { width: number, rgb: Buffer } {
  const path = join(newFolder(), 'forecast.png')
  writeFileSync(path, png)
  const width = Number(execFileSync('identify', ['-format', '%w', path], { encoding: 'utf8' }))
  return { width, rgb: execFileSync('convert', [path, '-alpha', 'off', '-depth', '8', 'rgb:-'], { maxBuffer: 1e8 }) }
}

it('shows in all three states what the server forecasts, within one code of 255 everywhere', async () => {
  const { agent, root, studio, negative } = await newNegative()
  const { page } = await newPage({ agent, reducedMotion: true })
  await page.goto(`/s/${studio.slug}/negatives/${negative.id}`)
  await page.getByText(/forecast, L\*/).filter({ visible: true }).waitFor()
  await page.waitForFunction(() => [...document.querySelectorAll('canvas')].every(canvas => canvas.width > 300))

  for (const [place, state] of ['photo', 'film', 'print'].entries()) {
    const answer = await agent.fetch('GET', `${root}/negatives/${negative.id}/forecast?width=1200&state=${state}`)
    expect(answer.status).toBe(200)
    const server = decode(Buffer.from(await answer.arrayBuffer()))
    const shown = await canvasPixels(page, place)
    expect(shown.width).toBe(server.width)
    let greatest = 0
    for (let pixel = 0; pixel < shown.width * shown.height; pixel++) {
      for (let channel = 0; channel < 3; channel++) greatest = Math.max(greatest, Math.abs(shown.pixels[4 * pixel + channel]! - server.rgb[3 * pixel + channel]!))
    }
    expect(greatest, `${state}: greatest difference in codes`).toBeLessThanOrEqual(1)
  }
})

it('asks nothing of the server while a slider moves, and keeps the change afterwards', async () => {
  const { agent, root, studio, negative } = await newNegative()
  const { page } = await newPage({ agent })
  await page.goto(`/s/${studio.slug}/negatives/${negative.id}`)
  await page.getByText(/forecast, L\*/).filter({ visible: true }).waitFor()
  const slider = page.getByRole('slider', { name: 'Middle tones' }).first()
  await slider.focus()
  const asked: string[] = []
  page.on('request', request => asked.push(`${request.method()} ${new URL(request.url()).pathname}`))
  await page.keyboard.press('ArrowRight')
  await page.keyboard.press('ArrowRight')
  expect(asked).toEqual([])
  await page.getByText(/^Kept/).waitFor()
  expect(asked.filter(request => /proxy|forecast|file/.test(request))).toEqual([])
  const kept = (await agent.get(`${root}/negatives/${negative.id}`)).body
  expect(kept.adjustments.midtone).toBeCloseTo(0.22, 6)
})

it('puts a change on top of one made elsewhere, and says so', async () => {
  const { agent, root, studio, negative } = await newNegative()
  const { page } = await newPage({ agent })
  // The page learns of the other change only by being refused: its stream of hints is held back.
  await page.route('**/events', route => route.abort())
  await page.goto(`/s/${studio.slug}/negatives/${negative.id}`)
  const slider = page.getByRole('slider', { name: 'Contrast' }).first()
  await slider.waitFor()
  const other = await agent.patch(`${root}/negatives/${negative.id}`, { revision: negative.revision, name: 'Renamed elsewhere' })
  expect(other.status).toBe(200)
  await slider.focus()
  await page.keyboard.press('ArrowRight')
  await page.getByText('changed elsewhere meanwhile').waitFor()
  await page.getByRole('heading', { name: 'Renamed elsewhere' }).waitFor()
  await page.getByText(/^Kept/).waitFor()
  const kept = (await agent.get(`${root}/negatives/${negative.id}`)).body
  expect(kept.name).toBe('Renamed elsewhere')
  expect(kept.adjustments.contrast).toBeCloseTo(0.31, 6)
})
