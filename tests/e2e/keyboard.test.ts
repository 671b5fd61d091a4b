import { expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { newPage, photograph, useBrowser } from '../support/browser'
import { newStudio } from '../support/studio'

useBrowser()

/** Presses Tab until what has the focus is called so; the way a person without a mouse finds it. */
async function tabTo(page: Page, name: RegExp) {
  for (let presses = 0; presses < 60; presses++) {
    await page.keyboard.press('Tab')
    const focused = await page.evaluate(() => {
      const element = document.activeElement as HTMLElement | null
      const labels = (element as HTMLInputElement | null)?.labels
      return element?.getAttribute('aria-label') ?? (labels?.length ? labels[0]!.innerText : element?.innerText) ?? ''
    })
    if (name.test(focused)) return
  }
  throw new Error(`Tab does not reach ${name}`)
}

it('makes and downloads a film, and changes its tones, by keyboard alone', async () => {
  const { studio, email, password } = await newStudio()
  const { page } = await newPage()
  await page.goto('/')
  await tabTo(page, /^E-mail/)
  await page.keyboard.type(email)
  await tabTo(page, /^Password/)
  await page.keyboard.type(password)
  await page.keyboard.press('Enter')
  await page.waitForURL(`**/s/${studio.slug}`)

  await page.getByRole('heading', { name: 'New negative' }).waitFor()
  const choosing = page.waitForEvent('filechooser')
  await tabTo(page, /^Choose photos/)
  await page.keyboard.press('Enter')
  await (await choosing).setFiles(photograph(1200, 900))
  await page.getByRole('button', { name: 'Change the photo' }).waitFor()
  const downloading = page.waitForEvent('download')
  await tabTo(page, /^Download film/)
  await page.keyboard.press('Enter')
  expect((await downloading).suggestedFilename()).toMatch(/\.pdf$/)

  await tabTo(page, /^Adjust tones/)
  await page.keyboard.press('Enter')
  await page.waitForURL('**/negatives/*')
  await page.getByRole('slider', { name: 'Contrast' }).first().waitFor()
  await tabTo(page, /^Contrast/)
  const contrast = page.getByRole('slider', { name: 'Contrast' }).first()
  await page.keyboard.press('ArrowRight')
  await page.keyboard.press('Shift+ArrowRight')
  expect(await contrast.getAttribute('aria-valuetext')).toBe('+11')
  await page.keyboard.press('Control+z')
  await page.getByText(/^Kept/).waitFor()
  expect(await contrast.getAttribute('aria-valuetext')).not.toBe('+11')
})
