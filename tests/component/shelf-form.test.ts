import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, describe, expect, it } from 'vitest'
import { nextTick, ref } from 'vue'
import ShelfForm from '../../components/shelf/ShelfForm.vue'
import { shelfDraft, writtenFacts } from '../../utils/shelf-draft'

async function mountForm(kind: 'papers' | 'sensitizers' | 'inkjets' | 'lamps', issues: Record<string, string> = {}) {
  const draft = ref(shelfDraft(kind))
  const form = await mountSuspended(ShelfForm, { props: { kind, modelValue: draft.value, issueOf: (path: string) => issues[path] } })
  const field = (label: string) => form.get(`#${form.findAll('label').find(one => one.text() === label)!.attributes('for')}`)
  return { form, field, facts: () => writtenFacts(kind, draft.value) }
}

describe('the form of a record', () => {
  afterEach(() => usePreferences().setLengthUnit('mm'))

  it('takes figures with a decimal comma, choices, and sizes as people write them', async () => {
    const { form, field, facts } = await mountForm('papers')
    await field('Weight').setValue('300,5')
    await field('Surface').setValue('hot-pressed')
    for (const size of ['A4', '56 × 76 cm', '20,3 x 25,4 cm']) {
      await field('Sheet sizes').setValue(size)
      await form.get('[aria-label="Add to sheet sizes"]').trigger('click')
    }
    await form.get('[aria-label="Take out 210 × 297 mm"]').trigger('click')
    expect(facts()).toEqual({ weightGramsPerM2: 300.5, surface: 'hot-pressed', sizes: [{ widthMm: 560, heightMm: 760 }, { widthMm: 203, heightMm: 254 }] })
  })

  it('keeps a size that cannot be read in the field, with a sentence', async () => {
    const { form, field, facts } = await mountForm('papers')
    await field('Sheet sizes').setValue('as big as the table')
    await form.get('[aria-label="Add to sheet sizes"]').trigger('click')
    expect(form.get('[role=alert]').text()).toContain('Write a size like')
    expect((field('Sheet sizes').element as HTMLInputElement).value).toBe('as big as the table')
    expect(facts()).toEqual({})
  })

  it('shows and takes lengths in the preferred unit, and keeps millimetres', async () => {
    const { field, facts } = await mountForm('lamps')
    await field('Distance to the glass').setValue('11,5')
    expect(facts()).toEqual({ distanceMm: 115 }) // cm
    usePreferences().setLengthUnit('inch')
    await nextTick()
    await field('Distance to the glass').setValue('4.5')
    expect(facts()).toEqual({ distanceMm: 114.3 }) // 4.5 × 25.4
  })

  it('adds parts and substances, names the parts by letters, and takes them out', async () => {
    const { form, facts } = await mountForm('sensitizers')
    const press = async (text: string) => form.findAll('button').filter(button => button.text() === text).at(-1)!.trigger('click')
    await press('Add a part')
    await press('Add a part')
    await press('Add a substance')
    const substances = form.findAll('label').filter(label => label.text() === 'Substance').map(label => form.get(`#${label.attributes('for')}`))
    await substances.at(-1)!.setValue('Potassium ferricyanide')
    expect(facts()).toEqual({ parts: [{ name: 'A' }, { name: 'B', substances: [{ substance: 'Potassium ferricyanide' }] }] })
    await form.get('[aria-label="Take out substance 2 of part B"]').trigger('click')
    await press('Take out part A')
    expect(facts()).toEqual({ parts: [{ name: 'B' }] })
  })

  it('takes native resolutions in one line and says which figures it can’t use', async () => {
    const { form, field, facts } = await mountForm('inkjets')
    const line = field('Native resolutions, pixels per inch')
    await line.setValue('360, 720')
    expect(facts()).toEqual({ nativePixelsPerInch: [360, 720] })
    await line.setValue('360, 720.5')
    expect(form.get('[role=alert]').text()).toContain('whole figures between 72 and 1440')
    expect(facts()).toEqual({ nativePixelsPerInch: [360, 720] })
  })

  it('says beside its field what the service refused', async () => {
    const { form } = await mountForm('inkjets', { 'facts.paths': 'Two paths have the same name.' })
    expect(form.findAll('[role=alert]').map(one => one.text())).toEqual(['Two paths have the same name.'])
  })
})
