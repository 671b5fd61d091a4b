import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import TabletEntry from '../../components/tablet/TabletEntry.vue'

// The test's document draws no canvas.
const withoutCanvas = { stubs: { LinePlot: true } }
const mounted = () => mountSuspended(TabletEntry, { props: { readings: [], busy: false }, global: withoutCanvas })

describe('TabletEntry', () => {
  it('gives on the steps that were measured, with the tablet’s usual densities and the exposure', async () => {
    const form = await mounted()
    for (let step = 1; step <= 6; step++) await form.find(`[aria-label="Step ${step}, Print, L*"]`).setValue(String(20 + 10 * step))
    const label = form.findAll('label').find(one => one.text().startsWith('How it was exposed'))!
    await form.find(`#${CSS.escape(label.attributes('for')!)}`).setValue('4:20')
    await form.find('form').trigger('submit')
    const body = form.emitted('keep')![0]![0] as { values: { density: number, lightness: number }[] }
    expect(body).toMatchObject({ exposure: { value: 260, unit: 's' } })
    expect(body.values.map(v => v.lightness)).toEqual([30, 40, 50, 60, 70, 80])
    // common practice, no source: 0.05, then 0.15 a step
    expect(body.values.map(v => v.density)).toEqual([0.05, 0.2, 0.35, 0.5, 0.65, 0.8])
  })

  it('asks for five steps at least', async () => {
    const form = await mounted()
    await form.find('[aria-label="Step 1, Print, L*"]').setValue('22')
    await form.find('form').trigger('submit')
    expect(form.emitted('keep')).toBeUndefined()
    expect(form.text()).toContain('At least five steps are needed')
  })
})
