import { describe, expect, it } from 'vitest'
import { newPage, phone, useBrowser } from '../support/browser'
import { newStudio } from '../support/studio'

useBrowser()

describe('the shelf on a phone', () => {
  it('takes an inkjet with its path, gives a bench that path, copies it, takes it off, and finds it again', async () => {
    const { agent, studio, root } = await newStudio()
    const { page, context, elsewhere, errors } = await newPage({ agent, size: phone })
    const isWide = () => page.evaluate(() => document.documentElement.scrollWidth > innerWidth)
    await page.goto(`/s/${studio.slug}/shelf`)
    await page.getByText('No inkjet yet.').waitFor()
    await page.getByRole('link', { name: 'Add an inkjet' }).click()
    await page.getByLabel('Name', { exact: true }).fill('Wide one by the stairs')
    await page.getByLabel('Native resolutions, pixels per inch').fill('360 720')
    await page.getByLabel('Widest sheet').fill('43,2 cm')
    await page.getByRole('button', { name: 'Put it on the shelf' }).click()
    // A figure that cannot be read is said and gone to, and nothing is kept.
    await page.getByText('Write a figure, such as 12,5.').waitFor()
    expect(await page.evaluate(() => document.activeElement?.getAttribute('aria-invalid'))).toBe('true')
    expect((await agent.get(`${root}/inkjets`)).body.items).toEqual([])
    await page.getByLabel('Widest sheet').fill('431,8')
    await page.getByRole('button', { name: 'Add a path' }).click()
    await page.getByLabel('Name of the path').fill('Film, best')
    await page.getByLabel('File').selectOption('tiff')
    await page.getByLabel('Bit depth').selectOption('16')
    await page.getByLabel('Colour adjustment').selectOption('off')
    expect(await isWide()).toBe(false)
    await page.getByRole('button', { name: 'Put it on the shelf' }).click()
    await page.getByText('Film, best: TIFF, 16 bit, colour adjustment off').waitFor()
    const [inkjet] = (await agent.get(`${root}/inkjets`)).body.items
    expect(inkjet.facts).toEqual({ nativePixelsPerInch: [360, 720], widestSheetMm: 431.8, paths: [{ name: 'Film, best', fileKind: 'tiff', bitDepth: 16, colourAdjustment: 'off' }] })

    await page.goto(`/s/${studio.slug}/benches/new`)
    await page.getByLabel('Name', { exact: true }).fill('Blue on cotton')
    await page.getByLabel('Inkjet', { exact: true }).selectOption(inkjet.id)
    await page.getByLabel('Path of Wide one by the stairs').selectOption('Film, best')
    await page.getByRole('button', { name: 'Set up the bench' }).click()
    await page.getByText('Film, best: TIFF, 16 bit').waitFor()
    expect((await agent.get(`${root}/benches`)).body.items[0].path).toEqual({ fileKind: 'tiff', bitDepth: 16, colourAdjustment: 'off' })

    await page.getByRole('link', { name: 'Wide one by the stairs' }).click()
    await page.getByText('Where it is used').waitFor()
    await page.getByRole('link', { name: 'Copy' }).click()
    await page.getByLabel('Name', { exact: true }).fill('Narrow one')
    await page.getByLabel('Widest sheet').fill('210')
    await page.getByRole('button', { name: 'Put it on the shelf' }).click()
    await page.getByRole('heading', { level: 1, name: 'Narrow one' }).waitFor()
    await page.getByRole('button', { name: 'Take off the shelf' }).click()
    await page.getByText('Off the shelf since').waitFor()

    await page.getByRole('link', { name: 'Shelf', exact: true }).first().click()
    await page.getByLabel('Find by words').fill('film best 431,8')
    await page.getByText('1 found.').waitFor()
    await page.getByRole('link', { name: /^Wide one/ }).waitFor()
    await page.getByLabel('Find by words').fill('narrow')
    await page.getByText('Nothing found.').waitFor()
    await page.getByText('What was taken off', { exact: true }).click()
    await page.getByRole('link', { name: /^Narrow one/ }).click()
    await page.getByRole('button', { name: 'Put it back' }).click()
    await page.getByRole('button', { name: 'Take off the shelf' }).waitFor()
    const things = (await agent.get(`${root}/shelf`)).body.items.map((item: { name: string, facts: { widestSheetMm: number } }) => [item.name, item.facts.widestSheetMm])
    expect(things).toEqual([['Narrow one', 210], ['Wide one by the stairs', 431.8]])
    expect([...elsewhere, ...errors]).toEqual([])
    await context.close()
  })

  it('offers a copy where a printed bench stands on the record that is changed', async () => {
    const { agent, studio, root } = await newStudio()
    const paper = (await agent.post(`${root}/papers`, { name: 'Cotton rag', facts: { weightGramsPerM2: 300, lots: [{ name: 'Spring' }] } })).body
    const bench = (await agent.post(`${root}/benches`, { name: 'Blue on cotton', process: 'cyanotype', paperId: paper.id })).body
    const wedge = (await agent.post(`${root}/benches/${bench.id}/wedges`, { page: { widthMm: 210, heightMm: 297 } })).body
    await agent.post(`${root}/wedges/${wedge.id}/prints`, {})
    const { page, context } = await newPage({ agent, size: phone })
    await page.goto(`/s/${studio.slug}/shelf/papers/${paper.id}/change`)
    await page.getByText('Blue on cotton has been printed with it.').waitFor()
    await page.getByLabel('Weight').fill('640')
    await page.getByRole('button', { name: 'Make a copy with the change' }).click()
    await page.getByRole('heading', { level: 1, name: 'Cotton rag, copy' }).waitFor()
    const papers = (await agent.get(`${root}/papers`)).body.items.map((item: { name: string, facts: object, benchCount: number }) => [item.name, item.facts, item.benchCount])
    expect(papers).toEqual([['Cotton rag, copy', { weightGramsPerM2: 640 }, 0], ['Cotton rag', { weightGramsPerM2: 300, lots: [{ name: 'Spring' }] }, 1]])

    await page.goto(`/s/${studio.slug}/benches/${bench.id}/change`)
    await page.getByText('It has wedge prints or readings').waitFor()
    await page.getByLabel('Paper', { exact: true }).selectOption('Cotton rag, copy')
    await page.getByRole('button', { name: 'Keep the change' }).click()
    await page.getByText('This bench has been printed.').waitFor()
    await context.close()
  })
})
