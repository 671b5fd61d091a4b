import axe from 'axe-core'
import { readdirSync } from 'node:fs'
import { readFile } from 'node:fs/promises'
import type { Page } from 'playwright-core'
import { beforeAll, describe, expect, it } from 'vitest'
import { desk, newPage, phone, photograph, useBrowser } from '../support/browser'
import { newClass, newStudent } from '../support/classes'
import { newStudio } from '../support/studio'

useBrowser()

interface Records { slug: string, photo: string, negative: string, bench: string, wedge: string, reading: string, scanner: string, sensitizer: string, class: string }

/** Every screen, by its page file: where it is, and what is there once it stands. */
const screens: Record<string, { path: (r: Records) => string, stands: string, isPublic?: boolean }> = {
  'pages/index.vue': { path: () => '/', stands: 'h1', isPublic: true },
  'pages/shared.vue': { path: () => '/shared?why=sign-in', stands: 'h1', isPublic: true },
  'pages/open-studio.vue': { path: () => '/open-studio', stands: 'h1', isPublic: true },
  'pages/join.vue': { path: () => '/join', stands: 'h1', isPublic: true },
  'pages/s/[studio]/take-along.vue': { path: r => `/s/${r.slug}/take-along`, stands: 'h1' },
  'pages/s/[studio]/classes/index.vue': { path: r => `/s/${r.slug}/classes`, stands: '.ruled' },
  'pages/s/[studio]/classes/[class]/index.vue': { path: r => `/s/${r.slug}/classes/${r.class}`, stands: '.student' },
  'pages/s/[studio]/classes/[class]/code.vue': { path: r => `/s/${r.slug}/classes/${r.class}/code`, stands: 'svg path' },
  'pages/s/[studio]/index.vue': { path: r => `/s/${r.slug}`, stands: 'h1' },
  'pages/s/[studio]/negatives/[negative].vue': { path: r => `/s/${r.slug}/negatives/${r.negative}`, stands: '.captions' },
  'pages/s/[studio]/photos/index.vue': { path: r => `/s/${r.slug}/photos`, stands: 'h1' },
  'pages/s/[studio]/photos/bin.vue': { path: r => `/s/${r.slug}/photos/bin`, stands: 'h1' },
  'pages/s/[studio]/photos/[photo].vue': { path: r => `/s/${r.slug}/photos/${r.photo}`, stands: 'h1' },
  'pages/s/[studio]/benches/index.vue': { path: r => `/s/${r.slug}/benches`, stands: 'h1' },
  'pages/s/[studio]/benches/new.vue': { path: r => `/s/${r.slug}/benches/new`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/index.vue': { path: r => `/s/${r.slug}/benches/${r.bench}`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/change.vue': { path: r => `/s/${r.slug}/benches/${r.bench}/change`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/compare.vue': { path: r => `/s/${r.slug}/benches/${r.bench}/compare`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/exposure.vue': { path: r => `/s/${r.slug}/benches/${r.bench}/exposure`, stands: 'form' },
  'pages/s/[studio]/benches/[bench]/tablet.vue': { path: r => `/s/${r.slug}/benches/${r.bench}/tablet`, stands: 'form' },
  'pages/s/[studio]/benches/[bench]/reading.vue': { path: r => `/s/${r.slug}/benches/${r.bench}/reading`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/calibrate.vue': { path: r => `/s/${r.slug}/benches/${r.bench}/calibrate?step=expose`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/wedges/index.vue': { path: r => `/s/${r.slug}/benches/${r.bench}/wedges`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/wedges/[wedge].vue': { path: r => `/s/${r.slug}/benches/${r.bench}/wedges/${r.wedge}`, stands: 'h1' },
  'pages/s/[studio]/benches/[bench]/readings/[reading].vue': { path: r => `/s/${r.slug}/benches/${r.bench}/readings/${r.reading}`, stands: 'h1' },
  'pages/s/[studio]/shelf/index.vue': { path: r => `/s/${r.slug}/shelf`, stands: 'h1' },
  'pages/s/[studio]/shelf/new.vue': { path: r => `/s/${r.slug}/shelf/new?kind=inkjets`, stands: 'form' },
  'pages/s/[studio]/shelf/[drawer]/[item]/index.vue': { path: r => `/s/${r.slug}/shelf/sensitizers/${r.sensitizer}`, stands: 'dl' },
  'pages/s/[studio]/shelf/[drawer]/[item]/change.vue': { path: r => `/s/${r.slug}/shelf/sensitizers/${r.sensitizer}/change`, stands: 'form' },
  'pages/s/[studio]/shelf/scanners/[scanner].vue': { path: r => `/s/${r.slug}/shelf/scanners/${r.scanner}`, stands: 'form' },
  'pages/new-password.vue': { path: () => '/new-password', stands: 'h1', isPublic: true },
  'pages/confirm-address.vue': { path: () => '/confirm-address', stands: 'h1', isPublic: true },
  'pages/invitation.vue': { path: () => '/invitation', stands: 'h1', isPublic: true },
  'pages/sign-in-problem.vue': { path: () => '/sign-in-problem?why=registration_closed', stands: 'h1', isPublic: true },
  'pages/account.vue': { path: () => '/account', stands: 'h1' },
  'pages/s/[studio]/studio.vue': { path: r => `/s/${r.slug}/studio`, stands: 'h1' },
  'pages/s/[studio]/people.vue': { path: r => `/s/${r.slug}/people`, stands: 'h1' },
}

async function newRecords() {
  const { agent, root, studio } = await newStudio()
  const form = new FormData()
  form.append('file', new Blob([await readFile(photograph(1200, 900))], { type: 'image/jpeg' }), 'flower.jpg')
  const photo = (await agent.call('POST', `${root}/photos`, { body: form })).body.items[0]
  const negative = (await agent.post(`${root}/negatives`, { photoId: photo.id, process: 'cyanotype', size: { widthMm: 160, heightMm: 120 } })).body
  const bench = (await agent.post(`${root}/benches`, { name: 'Blue on cotton', process: 'cyanotype' })).body
  const wedge = (await agent.post(`${root}/benches/${bench.id}/wedges`, { page: { widthMm: 210, heightMm: 297 } })).body
  const reading = (await agent.post(`${root}/benches/${bench.id}/readings`, { unit: 'lightness', values: Array.from({ length: 21 }, (_, i) => ({ level: i / 20, value: 22 + 3.6 * i })) })).body
  const scanner = (await agent.post(`${root}/scanners`, { name: 'Flatbed by the window' })).body
  const sensitizer = (await agent.post(`${root}/sensitizers`, { name: 'Two parts', facts: { process: 'cyanotype', parts: [{ name: 'A', madeOn: '2026-03-02', substances: [{ substance: 'Ferric ammonium citrate', amount: '25 g' }] }] } })).body
  const open = await newClass({ agent, root })
  await newStudent(open)
  return { agent, records: { slug: studio.slug, photo: photo.id, negative: negative.id, bench: bench.id, wedge: wedge.id, reading: reading.id, scanner: scanner.id, sensitizer: sensitizer.id, class: open.id } as Records }
}

describe('accessibility', () => {
  it('has a row for every page file', () => {
    expect(Object.keys(screens).sort()).toEqual(readdirSync('pages', { recursive: true, encoding: 'utf8' }).filter(file => file.endsWith('.vue')).map(file => `pages/${file}`).sort())
  })

  let known: Awaited<ReturnType<typeof newRecords>>
  beforeAll(async () => {
    known = await newRecords()
  })

  for (const [file, screen] of Object.entries(screens)) {
    it(`finds nothing on ${file}, in both themes, on a desk and a phone`, async () => {
      const { page, context } = await newPage({ agent: screen.isPublic ? undefined : known.agent, reducedMotion: true })
      await page.goto(screen.path(known.records))
      await page.locator(screen.stands).filter({ visible: true }).first().waitFor()
      await page.evaluate(axe.source)
      for (const theme of ['light', 'dim']) {
        for (const size of [desk, phone]) {
          await page.setViewportSize(size)
          await page.evaluate(chosen => document.documentElement.dataset.theme = chosen, theme)
          expect(await violations(page), `${theme}, ${size.width} px`).toEqual([])
        }
      }
      await context.close()
    })
  }
})

const violations = (page: Page) => page.evaluate(async () => {
  // Colours change over 120 ms where motion is not reduced; here they change at once.
  const { violations } = await (window as unknown as { axe: typeof axe }).axe.run(document, { runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'], resultTypes: ['violations'] })
  return violations.map(({ id, nodes }) => `${id}: ${nodes.map(node => node.html.slice(0, 160)).join(' | ')}`)
})
