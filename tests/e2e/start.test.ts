import { execFileSync } from 'node:child_process'
import { randomUUID } from 'node:crypto'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { newPage, phone, photograph, useBrowser } from '../support/browser'
import { newFolder } from '../support/house'
import { newStudio } from '../support/studio'

useBrowser()

const facts = (program: string, args: string[]) => execFileSync(program, args, { encoding: 'utf8' })

describe('Start on a phone', () => {
  it('goes from an empty account to a PDF of a 12-megapixel photograph in at most four decisions, and asks no other machine', async () => {
    const { page, elsewhere, errors } = await newPage({ size: phone })
    await page.goto('/open-studio')
    await page.getByLabel('Your name').fill('Ines Marlow')
    await page.getByLabel('E-mail').fill(`${randomUUID()}@ropeworks.example`)
    await page.getByLabel('Password').fill('slow water, long rope')
    await page.getByRole('button', { name: 'Open the studio' }).click()
    await page.getByRole('heading', { name: 'New negative' }).waitFor()

    let decisions = 0
    const decide = async (step: () => Promise<unknown>) => {
      decisions += 1
      await step()
    }
    await decide(() => page.getByTestId('photo-files').setInputFiles(photograph()))
    await decide(async () => {
      await page.getByRole('button', { name: 'Change the bench or process' }).click()
      const dialog = page.getByRole('dialog')
      // It comes from below: seen whole, at the foot of the screen.
      expect(await dialog.evaluate(sheet => [Math.round(sheet.getBoundingClientRect().bottom), getComputedStyle(sheet).opacity])).toEqual([phone.height, '1'])
      await dialog.getByRole('button', { name: 'Van Dyke brown' }).click()
    })
    await decide(() => page.getByText('130 × 98').click())
    await page.getByText('uncalibrated').first().waitFor()
    const downloading = page.waitForEvent('download')
    await decide(() => page.getByRole('button', { name: /Download film/ }).click())
    const download = await downloading
    const path = join(newFolder(), 'film.pdf')
    await download.saveAs(path)

    expect(decisions).toBeLessThanOrEqual(4)
    expect(download.suggestedFilename()).toMatch(/\.pdf$/)
    // 130 mm and 98 mm in points of 1/72 inch, as poppler's pdfinfo rounds them
    expect(facts('pdfinfo', [path])).toMatch(/Page size:\s+368\.504 x 277\.795 pts/)
    // round(130 / 25.4 · 360) and round(98 / 25.4 · 360)
    expect(facts('pdfimages', ['-list', path])).toMatch(/\s1843\s+1389\s/)
    await page.getByRole('button', { name: /Film ready/ }).waitFor()
    expect(elsewhere).toEqual([])
    expect(errors).toEqual([])
  })

  it('says why a file that is no picture was not taken, and goes on', async () => {
    const { agent, studio } = await newStudio()
    const { page } = await newPage({ size: phone, agent })
    await page.goto(`/s/${studio.slug}`)
    await page.getByTestId('photo-files').setInputFiles({ name: 'notes.jpg', mimeType: 'image/jpeg', buffer: Buffer.from('not a picture at all') })
    expect(await page.getByRole('alert').innerText()).toMatch(/\w+ .*\./)
    await page.getByTestId('photo-files').setInputFiles(photograph(1200, 900))
    await page.getByRole('button', { name: 'Change the photo' }).waitFor()
  })
})
