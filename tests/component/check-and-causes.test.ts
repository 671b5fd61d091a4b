import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import CauseList from '../../components/curves/CauseList.vue'
import CurveNotes from '../../components/curves/CurveNotes.vue'
import ExpectedError from '../../components/curves/ExpectedError.vue'
import { checkLeftOverPlot, checkPlot } from '../../utils/check-plots'

describe('CauseList', () => {
  it('says what to do with hands, and the figures that say so', async () => {
    const list = await mountSuspended(CauseList, { props: { causes: [{ code: 'more-ink', message: 'The ink lets UV through.', evidence: 'full ink L* 88.0, foil L* 95.0' }] } })
    expect(list.findAll('li')).toHaveLength(1)
    expect(list.text()).toContain('The ink lets UV through.')
    expect(list.text()).toContain('Seen: full ink L* 88.0, foil L* 95.0')
  })

  it('says so when nothing stands out', async () => {
    expect((await mountSuspended(CauseList, { props: { causes: [] } })).text()).toContain('Nothing stands out')
  })
})

describe('ExpectedError', () => {
  it('puts the next print first, then the curve, then what one more print would buy', async () => {
    const error = { nextPrint: { median: 1.3, p95: 3.04 }, curve: { median: 0.1, p95: 0.312 }, nextPrintWithOneMore: { median: 1.1, p95: 2.6 } }
    const text = (await mountSuspended(ExpectedError, { props: { error } })).text()
    expect(text).toMatch(/Your next print\s*about ± 3L\*\s*The curve itself\s*± 0.31L\*.*One more wedge print would bring this to about ± 2.6 L\*/s)
  })
})

describe('CurveNotes', () => {
  it('gives on a changed note, and closes when it has come back', async () => {
    const notes = await mountSuspended(CurveNotes, { props: { notes: 'Old', mayChange: true } })
    await notes.find('button').trigger('click')
    await notes.find('textarea').setValue('New batch')
    await notes.find('form').trigger('submit')
    expect(notes.emitted('keep')).toEqual([['New batch']])
    await notes.setProps({ notes: 'New batch' })
    expect(notes.find('textarea').exists()).toBe(false)
    expect(notes.text()).toContain('New batch')
  })

  it('lets a member read', async () => {
    const notes = await mountSuspended(CurveNotes, { props: { notes: 'Old', mayChange: false } })
    expect(notes.find('button').exists()).toBe(false)
  })
})

it('a check’s plots show what came against what was aimed at, and the difference about zero', () => {
  const points = [0, 0.5, 1].map(tone => ({ tone, aimed: 20 + 75 * tone, printed: 20 + 75 * tone + (tone === 0.5 ? 1.2 : 0), low: 19.5 + 75 * tone, high: 20.5 + 75 * tone + (tone === 0.5 ? 1.2 : 0) }))
  expect(checkPlot(points).lines.map(line => line.name)).toEqual(['printed', 'aimed at'])
  const left = checkLeftOverPlot(points)
  expect(left.lines[0]!.points[1]!.y).toBeCloseTo(1.2, 9)
  expect([left.y.min, left.y.max]).toEqual([-2, 2])
})
