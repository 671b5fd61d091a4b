import axe from 'axe-core'
import { readFileSync } from 'node:fs'
import type { Page } from 'playwright-core'
import { beforeAll, describe, expect, it, vi } from 'vitest'
import { newPage, phone, photograph, useBrowser } from '../support/browser'
import { newClass, newStudent } from '../support/classes'
import { newStudio } from '../support/studio'
import { chartOfRecord, printOfChart, scanFile, scanForm, scanOf } from '../support/wedge-scans'

/** Screens with something on them and something open on them, as they are used: plots, tables, menus, dialogs, pictures. */
interface Screen { path: (made: Made) => string, then?: (page: Page) => Promise<unknown> }
const screens: Record<string, Screen> = {
  'photos, a menu open': { path: () => 'photos', then: async (page) => {
    await page.locator('.photo-grid img').first().waitFor()
    await page.getByRole('button', { name: /^More for/ }).click()
  } },
  'a photo with its negative': { path: made => `photos/${made.photo}`, then: page => page.locator('.ruled img').first().waitFor() },
  'benches': { path: () => 'benches', then: page => page.getByText('Blue on cotton').waitFor() },
  'setting up a bench, the recipe open': { path: () => 'benches/new', then: page => page.locator('summary').first().click() },
  'a bench with its plots': { path: made => `benches/${made.bench}`, then: page => page.locator('canvas').first().waitFor() },
  'a curve as a table': { path: made => `benches/${made.bench}`, then: page => page.getByRole('button', { name: 'As a table' }).click() },
  'a base exposure to enter': { path: made => `benches/${made.bench}`, then: page => page.getByRole('button', { name: 'Enter a new one' }).click() },
  'another version laid beside a curve': { path: made => `benches/${made.bench}`, then: page => page.getByRole('button', { name: 'curve 1' }).click() },
  'a note being written': { path: made => `benches/${made.bench}`, then: page => page.getByRole('button', { name: 'Write a note' }).click() },
  'two benches compared': { path: made => `benches/${made.bench}/compare?with=${made.second}`, then: page => page.locator('canvas').first().waitFor() },
  'a strip of exposures, typed in': { path: made => `benches/${made.bench}/exposure`, then: async (page) => {
    for (const [i, lightness] of strip.entries()) await page.getByRole('textbox', { name: `Step ${i + 1}, L*` }).fill(String(lightness))
    await page.getByRole('button', { name: /^Keep/ }).waitFor()
  } },
  'a step tablet’s print': { path: made => `benches/${made.bench}/tablet`, then: page => page.locator('canvas').first().waitFor() },
  'a scanner with a profile': { path: made => `shelf/scanners/${made.scanner}`, then: page => page.locator('canvas').first().waitFor() },
  'a starter with its assumptions': { path: made => `benches/${made.starter}`, then: page => page.getByText('rests on assumptions').waitFor() },
  'a step of the walk with its pictures': { path: made => `benches/${made.bench}/calibrate?step=expose`, then: page => page.getByText('This will be print 2').waitFor() },
  'a film to put on paper, laid out': { path: made => `benches/${made.bench}/calibrate?step=wedge`, then: page => page.getByRole('img', { name: /^Scattered wedge/ }).waitFor() },
  'a wedge with its prints': { path: made => `benches/${made.bench}/wedges/${made.wedge}`, then: page => page.getByText('Read a print').waitFor() },
  'a scan that was read, a cell chosen, the table open': { path: made => `benches/${made.bench}/readings/${made.scan}`, then: async (page) => {
    await page.getByRole('button', { name: 'As a table' }).click()
    await page.getByRole('button', { name: 'Show cell 1 in the picture' }).click()
  } },
  'corners to put by hand, the loupe over one': { path: made => `benches/${made.bench}/readings/${made.scan}`, then: async (page) => {
    await page.getByRole('button', { name: 'Cells in the wrong place?' }).click()
    await page.getByRole('button', { name: /^Top left/ }).focus()
    await page.locator('.loupe').waitFor()
  } },
  'the shelf': { path: () => 'shelf', then: page => page.getByText('On one bench').waitFor() },
  'a record of the shelf being changed, all of it open': { path: made => `shelf/papers/${made.paper}/change`, then: page => page.evaluate(() => document.querySelectorAll('details').forEach(folded => folded.open = true)) },
  'classes': { path: () => 'classes', then: page => page.getByText('Blue afternoon').waitFor() },
  'a class with a student, their menu open': { path: made => `classes/${made.class}`, then: page => page.getByRole('button', { name: 'More for Mika' }).click() },
  'a class’s code on the wall': { path: made => `classes/${made.class}/code`, then: page => page.locator('svg path').first().waitFor() },
}

/** Derived: a print that falls evenly with exposure and then stays at its black. */
const strip = [86, 80, 71, 60, 48, 40, 37, 36, 36, 36]
type Made = Awaited<ReturnType<typeof furnish>>
async function furnish() {
  const { agent, root, studio } = await newStudio()
  const form = new FormData()
  form.append('file', new Blob([new Uint8Array(readFileSync(photograph(1200, 900)))], { type: 'image/jpeg' }), 'flower.jpg')
  const photo = (await agent.call('POST', `${root}/photos`, { body: form })).body.items[0]
  const paper = (await agent.post(`${root}/papers`, { name: 'Cotton rag, smooth', notes: 'Curls.', facts: { weightGramsPerM2: 300, surface: 'hot-pressed', white: { lightness: 96.4 }, sizes: [{ widthMm: 560, heightMm: 760 }], lots: [{ name: 'Spring', since: '2026-03-02' }] } })).body
  const bench = (await agent.post(`${root}/benches`, { name: 'Blue on cotton', process: 'cyanotype', paperId: paper.id, baseExposure: { value: 260, unit: 's' } })).body
  const values = Array.from({ length: 21 }, (_, i) => ({ level: i / 20, value: 22 + 73 * (i / 20) ** 1.3 }))
  const reading = (await agent.post(`${root}/benches/${bench.id}/readings`, { unit: 'lightness', values })).body
  await agent.post(`${root}/benches/${bench.id}/curves`, { readingIds: [reading.id], aim: 'even-density' })
  const curve = (await agent.post(`${root}/benches/${bench.id}/curves`, { readingIds: [reading.id] })).body
  await agent.post(`${root}/curves/${curve.id}/use`)
  const wedge = (await agent.post(`${root}/benches/${bench.id}/wedges`, { page: { widthMm: 150, heightMm: 115 } })).body
  const chart = chartOfRecord(wedge)
  const blue = (lightness: number) => [0, -30 * (1 - lightness / 95)] as const
  const picture = await scanFile(scanOf(printOfChart(chart), chart, {}, { hue: blue }))
  const scan = (await agent.call('POST', `${root}/wedges/${wedge.id}/readings`, { body: scanForm(picture) })).body
  await vi.waitUntil(async () => (await agent.get(`${root}/readings/${scan.id}`)).body.state === 'ready', { timeout: 60_000, interval: 300 })
  const second = (await agent.post(`${root}/benches`, { name: 'Blue on washi', process: 'cyanotype' })).body
  const other = (await agent.post(`${root}/benches/${second.id}/readings`, { unit: 'lightness', values: values.map(v => ({ ...v, value: 30 + 60 * v.level })) })).body
  await agent.post(`${root}/curves/${(await agent.post(`${root}/benches/${second.id}/curves`, { readingIds: [other.id] })).body.id}/use`)
  await agent.post(`${root}/benches/${bench.id}/tablets`, { values: Array.from({ length: 21 }, (_, i) => ({ density: 0.05 + 0.15 * i, lightness: 22 + 73 / (1 + Math.exp(-(i - 8) / 1.5)) })) })
  const scanner = (await agent.post(`${root}/scanners`, { name: 'Flatbed by the window' })).body
  await agent.post(`${root}/scanner-profiles/${scanner.id}`, { process: 'cyanotype', kind: 'grey-scale', points: Array.from({ length: 9 }, (_, i) => ({ scanned: 20 + 9 * i, measured: 15 + 9.6 * i })) })
  const open = await newClass({ agent, root })
  await newStudent(open)
  const starter = (await agent.post(`${root}/starter-benches`, { process: 'cyanotype' })).body
  await agent.post(`${root}/negatives`, { photoId: photo.id, benchId: bench.id, size: { widthMm: 100, heightMm: 100 } })
  return { agent, slug: studio.slug as string, photo: photo.id as string, bench: bench.id as string, paper: paper.id as string, wedge: wedge.id as string, scan: scan.id as string, second: second.id as string, scanner: scanner.id as string, starter: starter.id as string, class: open.id }
}

/** Counts the pixels of the screen that hold blue light. */
async function bluePixels(page: Page): Promise<number> {
  const picture = (await page.screenshot()).toString('base64')
  return page.evaluate(async (base64) => {
    const bitmap = await createImageBitmap(new Blob([Uint8Array.from(atob(base64), letter => letter.charCodeAt(0))], { type: 'image/png' }))
    const context = new OffscreenCanvas(bitmap.width, bitmap.height).getContext('2d')!
    context.drawImage(bitmap, 0, 0)
    return context.getImageData(0, 0, bitmap.width, bitmap.height).data.filter((value, i) => i % 4 === 2 && value > 0).length
  }, picture)
}

useBrowser()
let made: Made
beforeAll(async () => {
  made = await furnish()
})

describe('on a phone', () => {
  it.each(Object.entries(screens))('%s: no finding in either theme, nothing wider than the screen, no blue in the dim', async (_, { path, then }) => {
    const { page, context, elsewhere, errors } = await newPage({ agent: made.agent, size: phone, theme: 'dim', reducedMotion: true })
    await page.goto(`/s/${made.slug}/${path(made)}`)
    await page.locator('#content h1').waitFor()
    await then?.(page)
    await page.evaluate(axe.source)
    expect(await bluePixels(page)).toBe(0)
    for (const theme of ['dim', 'light'] as const) {
      await page.evaluate(chosen => document.documentElement.dataset.theme = chosen, theme)
      expect(await findings(page), theme).toEqual([])
      expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth), theme).toBeLessThanOrEqual(0)
    }
    expect([...elsewhere, ...errors]).toEqual([])
    await context.close()
  })
})

const findings = (page: Page) => page.evaluate(async () => {
  const { violations } = await (window as unknown as { axe: typeof axe }).axe.run(document, { resultTypes: ['violations'] })
  return violations.flatMap(({ id, nodes }) => nodes.map(node => `${id}: ${node.html.slice(0, 160)}`))
})
