import { createHash, randomFillSync } from 'node:crypto'
import { readFileSync } from 'node:fs'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { newPage, phone, useBrowser } from '../support/browser'
import { uploadForm } from '../support/pictures'
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
      await page.getByText('blossom is in the bin for 30 days').waitFor()
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

  it('goes on over a cut connection by itself, and after a reload with the same file chosen again, on a phone', async () => {
    const { agent, studio, root } = await newStudio()
    const { page, context, errors } = await newPage({ agent, size: phone })
    const side = 1000
    const buffer = await sharp(randomFillSync(Buffer.alloc(3 * side * side)), { raw: { width: side, height: side, channels: 3 } }).png({ compressionLevel: 0 }).toBuffer()
    const picture = { name: 'weir.png', mimeType: 'image/png', buffer }
    const network = await context.newCDPSession(page)
    const line = (uploadThroughput: number) => network.send('Network.emulateNetworkConditions', { offline: false, latency: 0, downloadThroughput: -1, uploadThroughput })
    await page.goto(`/s/${studio.slug}/photos`)
    await page.getByText('No photos yet').waitFor()
    await line(400_000)
    const isCut = (url: URL) => /\/uploads\/[^/]+$/.test(url.pathname)
    await page.route(isCut, route => route.request().method() === 'PATCH' ? route.abort('connectionreset') : route.fallback())
    await page.setInputFiles('[data-testid=photo-files]', [picture])
    const waits = page.getByText('Waiting for the connection; it goes on by itself.')
    await waits.waitFor()
    await page.unroute(isCut)
    await waits.waitFor({ state: 'hidden' })
    const bar = page.getByRole('progressbar', { name: 'weir.png' })
    const share = async () => Number(await bar.getAttribute('aria-valuenow'))
    await expect.poll(share, { timeout: 20_000 }).toBeGreaterThan(20)

    await page.reload()
    await page.getByText(/^Choose weir\.png again to go on at \d+ %\.$/).waitFor()
    await page.setInputFiles('[data-testid=choose-again]', [{ ...picture, buffer: Buffer.from(buffer).fill(7, 2_000_000) }])
    await page.getByText(/^This is another file/).waitFor()
    const atReload = await share()
    expect(atReload).toBeGreaterThan(10)
    await page.setInputFiles('[data-testid=choose-again]', [picture])
    await expect.poll(share, { timeout: 20_000 }).toBeGreaterThan(atReload)
    await page.getByRole('button', { name: 'Pause: weir.png' }).click()
    await page.getByText(/^paused at \d+ %$/).waitFor()
    await line(-1)
    await page.getByRole('button', { name: 'Go on: weir.png' }).click()
    await page.getByRole('heading', { name: 'One photo added' }).waitFor()
    await page.locator('.photo-grid').getByText('weir', { exact: true }).waitFor()
    const { items } = (await agent.get(`${root}/photos`)).body
    expect(items.map((photo: { sha256: string }) => photo.sha256)).toEqual([createHash('sha256').update(buffer).digest('hex')])
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(390)
    expect(errors).toEqual([])
    await context.close()
  })

  it('asks before it takes what another program has shared', async () => {
    const { agent, studio } = await newStudio()
    const form = uploadForm([['sprig.jpg', (await photograph('sprig.jpg', 300)).buffer]])
    const shared = await agent.call('POST', '/share', { body: form, headers: { 'sec-fetch-site': 'none' } })
    const { page, context } = await newPage({ agent, size: phone })
    await page.goto(shared.headers.get('location')!)
    await page.getByRole('heading', { name: `Take this picture into ${studio.name}?` }).waitFor()
    expect(await page.locator('.photo-grid > li').count()).toBe(0)
    await page.getByRole('button', { name: 'Take it' }).click()
    await page.locator('.photo-grid').getByText('sprig', { exact: true }).waitFor()
    await context.close()
  })

  it('takes nothing that another site’s page sends in the name of who is signed in', async () => {
    const { agent, root } = await newStudio()
    const { page, context } = await newPage({ agent })
    await page.route('http://elsewhere.example/**', route => route.fulfill({ contentType: 'text/html', body: '<form method="post" enctype="multipart/form-data"><input type="file" name="file"></form>' }))
    await page.goto('http://elsewhere.example/')
    const answered = page.waitForResponse(response => response.url().endsWith('/share'))
    await page.evaluate((address) => {
      const files = new DataTransfer()
      files.items.add(new File(['not yours'], 'planted.jpg', { type: 'image/jpeg' }))
      document.querySelector('input')!.files = files.files
      const form = document.querySelector('form')!
      form.action = `${address}/share`
      form.submit()
    }, agent.address)
    const answer = await answered
    const sent = await answer.request().allHeaders()
    expect([answer.status(), sent.origin]).toEqual([403, 'http://elsewhere.example'])
    expect((await agent.get(`${root}/uploads`)).body.items).toEqual([])
    await context.close()
  })

  it('can be put on a home screen: the manifest names icons that are there, and where pictures are shared to', async () => {
    const { page, context } = await newPage()
    await page.goto('/')
    const cdp = await context.newCDPSession(page)
    const { url, errors, data } = await cdp.send('Page.getAppManifest')
    expect([new URL(url).pathname, errors]).toEqual(['/manifest.webmanifest', []])
    const manifest = JSON.parse(data!) as { icons: { src: string, sizes: string, type: string, purpose?: string }[], share_target: { action: string } }
    for (const { src, sizes } of manifest.icons.filter(icon => icon.type === 'image/png')) {
      const { width, height } = await sharp(Buffer.from(await (await page.request.get(src)).body())).metadata()
      expect(`${width}x${height}`).toBe(sizes)
    }
    expect(manifest.icons.some(icon => icon.purpose === 'maskable')).toBe(true)
    expect(manifest.share_target.action).toBe('/share')
    await context.close()
  })
})
