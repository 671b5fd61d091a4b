import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import TeachScanner from '../../components/scanners/TeachScanner.vue'

// The test's document draws no canvas.
const withoutCanvas = { stubs: { LinePlot: true } }
const mounted = () => mountSuspended(TeachScanner, { props: { scannerId: 's', busy: false }, global: withoutCanvas })
async function fill(form: Awaited<ReturnType<typeof mounted>>, pairs: [string, string][]) {
  for (const [i, [scanned, known]] of pairs.entries()) {
    await form.find(`[aria-label="Step ${i + 1}, Scanned, L*"]`).setValue(scanned)
    await form.find(`[aria-label="Step ${i + 1}, Known, Density"]`).setValue(known)
  }
}

describe('TeachScanner', () => {
  it('gives on a grey scale’s pairs in L*, densities turned', async () => {
    const form = await mounted()
    await fill(form, [['95,2', '0.05'], ['80', '0,25'], ['62', '0.5'], ['41', '1'], ['24', '1.6']])
    await form.find('form').trigger('submit')
    const body = form.emitted('teach')![0]![0] as { process: string, kind: string, points: { scanned: number, measured: number }[] }
    expect(body).toMatchObject({ process: 'cyanotype', kind: 'grey-scale' })
    expect(body.points.map(p => p.scanned)).toEqual([95.2, 80, 62, 41, 24])
    // CIE 15:2004, 8.2.1: density 1 is Y = 0.1, L* 37.84
    expect(body.points[3]!.measured).toBeCloseTo(37.84, 2)
  })

  it('says what is missing and keeps nothing', async () => {
    const form = await mounted()
    await fill(form, [['95', '0.05'], ['60', '']])
    await form.find('form').trigger('submit')
    expect(form.emitted('teach')).toBeUndefined()
    expect(form.text()).toContain('Some fields need another look.')
    await form.find('[aria-label="Step 2, Known, Density"]').setValue('0.5')
    expect(form.text()).toContain('2 of at least 5 pairs are written.')
  })
})
