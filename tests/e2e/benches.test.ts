import { readFileSync } from 'node:fs'
import type { Page } from 'playwright-core'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { newPage, phone, useBrowser } from '../support/browser'
import { newStudio } from '../support/studio'

/** Lightness of a logistic paper at 21 even steps of ink, as an instrument would show it with a decimal comma (derived, rounded to 0.1). */
const steps = Array.from({ length: 21 }, (_, i) => i / 20)
const logistic = (ink: number) => 1 / (1 + Math.exp(-5 * (ink - 0.55)))
const lightness = steps.map(ink => 22.6 + 72.2 * (logistic(ink) - logistic(0)) / (logistic(1) - logistic(0)))
const column = lightness.map(value => value.toFixed(1).replace('.', ',')).join('\n')

useBrowser()

async function pasteInto(page: Page, label: string, text: string) {
  await page.getByLabel(label, { exact: true }).focus()
  await page.evaluate((pasted) => {
    const clipboardData = new DataTransfer()
    clipboardData.setData('text/plain', pasted)
    document.activeElement!.dispatchEvent(new ClipboardEvent('paste', { clipboardData, bubbles: true, cancelable: true }))
  }, text)
}

describe('a bench', () => {
  it('goes from set up over typed-in values to a curve in use and a negative with it', async () => {
    const { agent, studio, root } = await newStudio()
    const { page, context, elsewhere, errors } = await newPage({ agent })
    await page.goto(`/s/${studio.slug}/benches`)
    await page.getByRole('link', { name: 'Set up a bench' }).click()
    await page.getByLabel('Name', { exact: true }).fill('Blue on cotton')
    await page.getByLabel('Base exposure, such as 4 min 20 s').fill('4:20')
    await page.getByRole('button', { name: 'New paper' }).click()
    await page.getByLabel('Name of the new paper').fill('Cotton rag, smooth')
    await page.getByRole('button', { name: 'Put on the shelf' }).click()
    await page.getByRole('button', { name: 'Set up the bench' }).click()

    await page.getByRole('link', { name: 'Enter readings' }).click()
    await pasteInto(page, 'Step 1, Lightness, L*', column)
    await page.getByText('21 rows pasted.').waitFor()
    await page.getByRole('button', { name: 'Keep 21 values' }).click()

    await page.getByText('Next: fit a curve.').waitFor()
    await page.getByRole('button', { name: 'Fit a curve', exact: true }).click()
    await page.getByText('Next: put curve 1 in use.').waitFor()
    await page.getByRole('button', { name: 'Use curve 1' }).first().click()
    await page.getByText('Curve 1 in use', { exact: true }).waitFor()

    const bench = (await agent.get(`${root}/benches`)).body.items[0]
    expect(bench.baseExposure).toMatchObject({ value: 260, unit: 's' })
    const curve = (await agent.get(`${root}/curves/${bench.curveInUse.id}`)).body
    expect(curve.blackLightness).toBeCloseTo(22.6, 0)
    expect(curve.whiteLightness).toBeCloseTo(94.8, 0)

    await page.getByRole('button', { name: 'As a table' }).click()
    const middle = await page.locator('table.ledger tr', { has: page.locator('th', { hasText: /^50$/ }) }).locator('td').allTextContents()
    // half way between 22.6 and 94.8 is 58.7; the ink that gives it is where the logistic is half way: derived
    expect(Math.abs(Number(middle[0]) - 58.7)).toBeLessThan(0.7)
    const wanted = logistic(0) + (logistic(1) - logistic(0)) / 2
    expect(Math.abs(Number(middle[2]) - 100 * (0.55 - Math.log(1 / wanted - 1) / 5))).toBeLessThan(0.7)

    await page.getByRole('link', { name: 'Make a negative' }).click()
    const picture = await sharp(readFileSync('/usr/share/libjxl-testdata/external/wesaturate/500px/cvo9xd_keong_macan_srgb8.png')).jpeg().toBuffer()
    await page.setInputFiles('[data-testid=photo-files]', { name: 'cliff.jpg', mimeType: 'image/jpeg', buffer: picture })
    const film = page.waitForEvent('download', { timeout: 60_000 })
    await page.getByRole('button', { name: /Download/ }).first().click()
    expect((await film).suggestedFilename()).toMatch(/\.pdf$/)
    const negative = (await agent.get(`${root}/negatives`)).body.items[0]
    expect(negative).toMatchObject({ benchId: bench.id, curveId: curve.id, curve: { version: 1, calibrated: true } })
    expect([...elsewhere, ...errors]).toEqual([])
    await context.close()
  })

  it('says beside the field what cannot be read, and what the service cannot use', async () => {
    const { agent, studio, root } = await newStudio()
    const bench = (await agent.post(`${root}/benches`, { name: 'Blue', process: 'cyanotype' })).body
    const { page, context } = await newPage({ agent, size: phone })
    await page.goto(`/s/${studio.slug}/benches/${bench.id}/reading`)
    await page.getByRole('button', { name: '11 steps' }).click()
    await page.getByLabel('Step 1, Lightness, L*', { exact: true }).fill('dark')
    await page.getByRole('button', { name: /Keep/ }).click()
    await page.getByText('“dark” is not a number.').waitFor()
    await pasteInto(page, 'Step 1, ink in per cent', '0\t22\n50\t51\n100\t94')
    for (let step = 4; step <= 11; step++) await page.getByLabel(`Step ${step}, ink in per cent`, { exact: true }).fill('')
    await page.getByRole('button', { name: 'Keep 3 values' }).click()
    const refusal = await page.locator('form [role=alert]').last().textContent()
    expect(refusal).toMatch(/level/)
    expect((await agent.get(`${root}/benches/${bench.id}/readings`)).body.items).toEqual([])
    await context.close()
  })

  it('imports a CSV file and warns of a local fall', async () => {
    const { agent, studio, root } = await newStudio()
    const bench = (await agent.post(`${root}/benches`, { name: 'Blue', process: 'cyanotype', baseExposure: { value: 260, unit: 's' } })).body
    const { page, context } = await newPage({ agent })
    await page.goto(`/s/${studio.slug}/benches/${bench.id}/reading`)
    const fallen = lightness.map((value, i) => i === 10 ? value - 9 : value)
    const csv = `level,lightness\n${steps.map((level, i) => `${level},${fallen[i]!.toFixed(2)}`).join('\n')}\n`
    await page.setInputFiles('input[aria-label="File with readings"]', { name: 'strip.csv', mimeType: 'text/csv', buffer: Buffer.from(csv) })
    await page.getByText('Next: fit a curve.').waitFor()
    const reading = (await agent.get(`${root}/benches/${bench.id}/readings`)).body.items[0]
    expect(reading.patches).toHaveLength(21)
    expect(reading.warnings.map((warning: { code: string }) => warning.code)).toContain('not_monotone')
    await page.getByText(reading.warnings.find((warning: { code: string }) => warning.code === 'not_monotone').message).first().waitFor()
    await context.close()
  })

  it('offers a copy when the combination of a bench with readings is changed', async () => {
    const { agent, studio, root } = await newStudio()
    const bench = (await agent.post(`${root}/benches`, { name: 'Blue', process: 'cyanotype' })).body
    await agent.post(`${root}/benches/${bench.id}/readings`, { unit: 'lightness', values: steps.map((level, i) => ({ level, value: lightness[i] })) })
    const { page, context } = await newPage({ agent })
    await page.goto(`/s/${studio.slug}/benches/${bench.id}/change`)
    await page.getByLabel('Process').selectOption('van-dyke')
    await page.getByRole('button', { name: 'Keep the change' }).click()
    await page.getByRole('button', { name: 'Make the copy' }).click()
    await page.getByRole('heading', { level: 1, name: 'Blue, changed' }).waitFor()
    const { items } = (await agent.get(`${root}/benches`)).body
    expect(items.map((one: { name: string, process: string }) => [one.name, one.process])).toEqual([['Blue, changed', 'van-dyke'], ['Blue', 'cyanotype']])
    await context.close()
  })
})
