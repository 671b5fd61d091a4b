import { describe, expect, it } from 'vitest'
import { desk, newPage, phone, photograph, useBrowser } from '../support/browser'
import { newStudio } from '../support/studio'

useBrowser()

describe('a class', () => {
  it('goes from the teacher’s desk to a student’s phone and back: joined by the link, photo, negative, film, handed in, seen', async () => {
    const { agent, studio } = await newStudio()
    const teacher = await newPage({ agent, size: desk })
    await teacher.page.goto(`/s/${studio.slug}/classes`)
    await teacher.page.getByLabel('Name').fill('Blue afternoon')
    await teacher.page.getByRole('button', { name: 'Open the class' }).click()
    await teacher.page.getByText('Nobody has joined yet: show this code.').waitFor()
    await teacher.page.getByRole('img', { name: /^QR code/ }).waitFor()
    const { items: [open] } = (await agent.get(`/api/studios/${studio.id}/classes`)).body

    const student = await newPage({ size: phone })
    await student.page.goto(open.joinUrl)
    await student.page.getByRole('heading', { name: 'Blue afternoon' }).waitFor()
    expect(student.page.url()).not.toContain(open.roomCode)
    await student.page.getByLabel('Your first name').fill('Mika')
    await student.page.getByRole('button', { name: 'Join' }).click()
    const personalCode = await student.page.getByTestId('personal-code').innerText()
    expect(personalCode).toMatch(/^\w{4} \w{4} \w{4}$/)
    await student.page.getByRole('button', { name: 'I have written it down' }).click()
    await student.page.getByText('Your teacher sees what you hand in').waitFor()
    const row = teacher.page.getByRole('listitem').filter({ hasText: 'Mika' })
    await row.getByText('Joined').waitFor()

    await student.page.getByTestId('photo-files').setInputFiles(photograph(1200, 900))
    await row.getByText('Photo').waitFor()
    const downloading = student.page.waitForEvent('download')
    await student.page.getByRole('button', { name: /Download film/ }).click()
    await downloading
    await row.getByText('Film').waitFor()
    await student.page.getByRole('button', { name: /^Hand in/ }).click()
    await student.page.getByRole('button', { name: /^Take back/ }).waitFor()
    await row.getByText('Handed in').waitFor()
    const pictures = teacher.page.locator('.pieces img')
    await teacher.page.locator('.pieces').scrollIntoViewIfNeeded() // they are loaded once they come into sight
    await expect.poll(() => pictures.evaluateAll(all => all.filter(img => (img as HTMLImageElement).naturalWidth > 0).length), { timeout: 30_000 }).toBe(3)
    expect(await student.page.evaluate(() => document.documentElement.scrollWidth)).toBe(phone.width)

    const second = await newPage({ size: phone })
    await second.page.goto('/join')
    await second.page.getByRole('button', { name: /personal code/ }).click()
    await second.page.getByLabel('Personal code').fill(personalCode.toLowerCase())
    await second.page.getByRole('button', { name: 'Come back' }).click()
    await second.page.getByRole('link', { name: /handed in/ }).waitFor()
    expect([teacher, student, second].flatMap(({ elsewhere, errors }) => [...elsewhere, ...errors])).toEqual([])
    for (const { context } of [teacher, student, second]) await context.close()
  })
})
