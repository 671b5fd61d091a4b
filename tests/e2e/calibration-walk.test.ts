import type { Page } from 'playwright-core'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { centreOf } from '../../shared/calibration/wedge/page'
import { desk, newPage, phone, useBrowser } from '../support/browser'
import { newPersonIn } from '../support/people'
import { flatbed } from '../support/scan-simulator/cameras'
import { newStudio } from '../support/studio'
import { chartOfRecord, type Chart, newWedge, printOfChart, printTone, scanFile, scanForm, scanOf } from '../support/wedge-scans'

useBrowser()

const path = { fileKind: 'pdf', pixelsPerInch: 360, colourAdjustment: 'off' }
const next = (page: Page, name: string) => page.getByRole('link', { name: `Next: ${name}` }).click()
const stands = (page: Page, name: string) => page.getByRole('heading', { level: 1, name }).waitFor()

describe('the walk through a calibration, on a phone', () => {
  it('leads from a new bench over film, print and scan to a curve in use', async () => {
    const { agent, studio, root } = await newStudio()
    const bench = (await agent.post(`${root}/benches`, { name: 'Blue on cotton', process: 'cyanotype', path, baseExposure: { value: 260, unit: 's' } })).body
    const { page, context, elsewhere, errors } = await newPage({ agent, size: phone })
    await page.goto(`/s/${studio.slug}/benches/${bench.id}`)
    await page.getByText('Next: see whether the film takes the ink.').waitFor()
    await page.getByRole('link', { name: 'Try the ink load' }).click()

    await stands(page, 'Ink load and drying')
    await page.getByRole('button', { name: /The film is out of the inkjet/ }).click()
    await page.getByRole('timer').getByText('30 min').waitFor()
    await page.getByLabel('Note for the next time').fill('Dry after twenty minutes.')
    await page.getByRole('button', { name: 'Keep the note' }).click()
    await page.getByRole('button', { name: 'Keep the note' }).waitFor({ state: 'detached' })
    await page.getByRole('button', { name: 'The film takes it' }).click()
    await stands(page, 'Base exposure')
    await page.getByText('Done', { exact: true }).waitFor()
    await next(page, 'ink trial')
    await next(page, 'wedge on film')

    await stands(page, 'Wedge on film')
    await page.getByText('Free', { exact: true }).click()
    await page.getByLabel('Width').fill('150')
    await page.getByLabel('Height').fill('115')
    await page.getByRole('button', { name: 'Lay it out' }).click()
    const download = page.waitForEvent('download', { timeout: 60_000 })
    await page.getByRole('button', { name: 'Download as PDF' }).click()
    expect((await download).suggestedFilename()).toMatch(/\.pdf$/)
    await next(page, 'wedge print')

    await stands(page, 'Expose, develop, dry')
    await page.getByText('This will be print 1 of the wedge.').waitFor()
    await page.getByRole('button', { name: 'Exposed today' }).click()
    await page.getByRole('button', { name: 'Hung to dry' }).click()
    await page.getByText(/^drying, (24 h|23 h 5\d min) left$/).waitFor()

    await page.goto(`/s/${studio.slug}/benches/${bench.id}`)
    await page.getByText('Next: read the wedge print.').waitFor()
    await page.getByRole('link', { name: 'Read the print' }).click()
    await stands(page, 'Read the print')
    const { items: [brief] } = (await agent.get(`${root}/benches/${bench.id}/wedges`)).body
    const chart = chartOfRecord((await agent.get(`${root}/wedges/${brief.id}`)).body)
    const scan = await scanFile(scanOf(printOfChart(chart), chart))
    await page.setInputFiles('[data-testid=scan-file]', { name: 'print 1.jpg', mimeType: 'image/jpeg', buffer: scan })

    await stands(page, 'Reading of wedge print 1')
    await page.getByText(/192 cells were read/).waitFor({ timeout: 60_000 })
    await page.getByRole('button', { name: 'As a table' }).click()
    await page.getByRole('button', { name: 'Show cell 1 in the picture' }).click()
    await page.getByText(/^Cell 1, spread/).waitFor()
    await page.getByRole('link', { name: 'On to the curve' }).click()

    await stands(page, 'Curve')
    await page.getByRole('button', { name: 'Fit a curve of one print' }).click()
    await page.getByRole('button', { name: 'Use curve 1' }).click()
    await page.getByRole('heading', { name: 'Curve 1, in use' }).waitFor()
    await next(page, 'a real picture')
    await page.getByRole('link', { name: 'Make a negative' }).waitFor()

    const walk = (await agent.get(`${root}/benches/${bench.id}/walk`)).body
    expect(walk.now).toBe('check')
    expect(walk.steps.find((one: { step: string }) => one.step === 'ink-load')).toMatchObject({ state: 'done', notes: 'Dry after twenty minutes.' })
    const { curveInUse } = (await agent.get(`${root}/benches/${bench.id}`)).body
    // the simulator's paper runs from L* 18 to 94; its coating and texture move single patches by about 2
    expect(Math.abs(curveInUse.blackLightness - printTone(0))).toBeLessThan(1.5)
    expect(Math.abs(curveInUse.whiteLightness - printTone(1))).toBeLessThan(1.5)
    expect([...elsewhere, ...errors]).toEqual([])
    await context.close()
  })

  it('is taken up on another device, where its clock runs on; a member only reads', async () => {
    const { agent, studio, root, ids } = await newStudio()
    const bench = (await agent.post(`${root}/benches`, { name: 'Blue on cotton', process: 'cyanotype' })).body
    const first = await newPage({ agent, size: phone })
    await first.page.goto(`/s/${studio.slug}/benches/${bench.id}/calibrate?step=ink-load`)
    await first.page.getByRole('button', { name: /The film is out of the inkjet/ }).click()
    await first.page.getByRole('timer').waitFor()

    const member = await newPersonIn(ids.studio, 'member')
    const second = await newPage({ agent: member.agent, size: phone })
    await second.page.goto(`/s/${studio.slug}/benches/${bench.id}/calibrate?step=ink-load`)
    await second.page.getByRole('timer').getByText(/^(30|29) min/).waitFor()
    expect(await second.page.locator('main').getByRole('button').count()).toBe(0)

    await first.page.getByRole('button', { name: 'Stop the clock' }).click()
    await second.page.getByRole('timer').waitFor({ state: 'detached' })
    await Promise.all([first.context.close(), second.context.close()])
  })
})

/** A scan lying straight, of which only the patches show, and where the corner marks would be. */
async function scanWithoutMarks(chart: Chart) {
  const straight = { pixelsPerInch: 200, skewDegrees: 0, warpMm: 0 }
  const camera = flatbed(chart.page, straight)
  const { xMm, yMm, widthMm, heightMm } = chart.page.field
  const [left, top] = camera.toPicture([xMm, yMm]).map(Math.round) as [number, number]
  const [right, bottom] = camera.toPicture([xMm + widthMm, yMm + heightMm]).map(Math.round) as [number, number]
  const patches = await sharp(await scanFile(scanOf(printOfChart(chart), chart, straight))).extract({ left, top, width: right - left, height: bottom - top }).toBuffer()
  const { width, height } = camera
  const bytes = await sharp({ create: { width, height, channels: 3, background: '#f2efe6' } }).composite([{ input: patches, left, top }]).jpeg({ quality: 93 }).toBuffer()
  return { bytes, width, height, corners: [0, 1, 2, 3].map(id => camera.toPicture(centreOf(chart.page.markers[id]!.place))) }
}

it('reads a picture without marks once its four corners are put by hand', async () => {
  const studio = await newStudio()
  const { agent, root } = studio
  const { benchId, wedgeId, chart } = await newWedge(studio)
  const { bytes, width, height, corners } = await scanWithoutMarks(chart)
  const reading = (await agent.call('POST', `${root}/wedges/${wedgeId}/readings`, { body: scanForm(bytes) })).body
  const { page, context, errors } = await newPage({ agent, size: desk })
  await page.goto(`/s/${studio.studio.slug}/benches/${benchId}/readings/${reading.id}`)
  await page.getByText('This picture could not be read.').waitFor()
  await page.getByRole('button', { name: 'Put the corners by hand' }).click()
  for (const [i, name] of ['Top left', 'Top right', 'Bottom right', 'Bottom left'].entries()) {
    const handle = page.getByRole('button', { name: new RegExp(`^${name}:`) })
    const ring = (await handle.boundingBox())!
    const picture = (await page.getByRole('img', { name: 'The picture with its four corners' }).boundingBox())!
    await page.mouse.move(ring.x + ring.width / 2, ring.y + ring.height / 2)
    await page.mouse.down()
    await page.mouse.move(picture.x + corners[i]![0] / width * picture.width, picture.y + corners[i]![1] / height * picture.height, { steps: 4 })
    await page.mouse.up()
  }
  await page.getByRole('button', { name: 'Bottom left' }).press('ArrowUp')
  await page.getByRole('button', { name: 'Read it with these corners' }).click()
  await page.getByText(/192 cells were read/).waitFor({ timeout: 60_000 })
  const { patches } = (await agent.get(`${root}/readings/${reading.id}`)).body
  const errorsOfPatches = patches.map((patch: { level: number, lightness: number }) => Math.abs(patch.lightness - printTone(patch.level))).sort((a: number, b: number) => a - b)
  // half of the patches within the print's own unevenness: a cell off its place would read its neighbour, dozens of L* away
  expect(errorsOfPatches[96]).toBeLessThan(1.5)
  expect(errors).toEqual([])
  await context.close()
})
