import { readFileSync } from 'node:fs'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { newPage, phone, useBrowser } from '../support/browser'
import { newStudio } from '../support/studio'

/** A CC0 photograph from Debian's libjxl-testdata, as the JPEG that a phone would send. */
const original = readFileSync('/usr/share/libjxl-testdata/external/wesaturate/500px/u76c0g_bliznaca_srgb8.png')
const photograph = async (name: string, width: number) => ({ name, mimeType: 'image/jpeg', buffer: await sharp(original).resize(width).jpeg({ quality: 90 }).toBuffer() })
const notes = { name: 'notes.jpg', mimeType: 'image/jpeg', buffer: Buffer.from('shopping: citric acid, blotting paper') }

useBrowser()

describe('photos', () => {
  it('takes several at once, explains the one that is no picture, and shows the others', async () => {
    const { agent, studio, root } = await newStudio()
    const { page, context, elsewhere, errors } = await newPage({ agent, size: phone })
    await page.goto(`/s/${studio.slug}/photos`)
    await page.getByText('No photos yet').waitFor()
    await page.setInputFiles('[data-testid=photo-files]', [await photograph('blossom.jpg', 900), notes, await photograph('sprig.jpg', 700)])
    await page.getByRole('heading', { name: '2 photos added' }).waitFor()
    const list = page.getByLabel('Photos on their way')
    expect(await list.getByRole('alert').textContent()).toMatch(/picture|image|JPEG/)
    expect(await list.getByText('notes.jpg').count()).toBeGreaterThan(0)
    expect((await page.locator('.photo-grid > li p.font-semibold').allTextContents()).sort()).toEqual(['blossom', 'sprig'])
    expect((await agent.get(`${root}/photos`)).body.items).toHaveLength(2)
    const pictures = page.locator('.photo-grid img')
    await expect.poll(() => pictures.evaluateAll(all => all.filter(img => (img as HTMLImageElement).naturalWidth > 0).length)).toBe(2)
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(390)
    expect([...elsewhere, ...errors]).toEqual([])
    await context.close()
  })

  it('puts a photo into the bin, takes it back, and finds it in the bin when left there', async () => {
    const { agent, studio } = await newStudio()
    const { page, context } = await newPage({ agent })
    await page.goto(`/s/${studio.slug}/photos`)
    await page.setInputFiles('[data-testid=photo-files]', [await photograph('blossom.jpg', 500)])
    const tile = page.locator('.photo-grid > li')
    await tile.waitFor()
    const bin = async () => {
      await page.getByRole('button', { name: 'More for blossom' }).click()
      await page.getByRole('menuitem', { name: 'Put into the bin' }).click()
      await page.getByText('blossom is in the bin').waitFor()
    }
    await bin()
    expect(await tile.count()).toBe(0)
    await page.getByRole('button', { name: 'Take it out' }).click()
    await tile.waitFor()
    await bin()
    await page.getByRole('link', { name: 'Bin' }).click()
    await page.getByRole('button', { name: 'Take out blossom' }).click()
    await page.getByText('blossom is among the photos again.').waitFor()
    await page.getByRole('link', { name: 'Back to the photos' }).click()
    await tile.waitFor()
    await context.close()
  })

  it('takes a picture that is pasted, and renames it by keyboard alone', async () => {
    const { agent, studio, root } = await newStudio()
    const { page, context } = await newPage({ agent })
    await page.goto(`/s/${studio.slug}/photos`)
    await page.getByRole('button', { name: 'Choose photos' }).first().waitFor()
    const pasted = (await photograph('pasted.jpg', 300)).buffer.toString('base64')
    await page.evaluate((base64) => {
      const transfer = new DataTransfer()
      transfer.items.add(new File([Uint8Array.from(atob(base64), letter => letter.charCodeAt(0))], 'from the clipboard.jpg', { type: 'image/jpeg' }))
      document.dispatchEvent(new ClipboardEvent('paste', { clipboardData: transfer, bubbles: true }))
    }, pasted)
    const more = page.getByRole('button', { name: 'More for from the clipboard' })
    await more.waitFor()
    await more.focus()
    await page.keyboard.press('Enter')
    await page.getByRole('menuitem', { name: 'Rename' }).waitFor()
    await page.keyboard.press('Enter')
    const name = page.getByLabel('Name', { exact: true })
    await name.waitFor()
    await name.press('Control+A')
    await page.keyboard.type('Blossom by the weir')
    await page.keyboard.press('Enter')
    await page.locator('.photo-grid').getByText('Blossom by the weir').waitFor()
    expect((await agent.get(`${root}/photos`)).body.items[0].name).toBe('Blossom by the weir')
    await context.close()
  })
})
