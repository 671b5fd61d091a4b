import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import StepSlider from '../../components/ui/StepSlider.vue'

const mountSlider = (modelValue: number) => mountSuspended(StepSlider, { props: { label: 'Contrast', min: -1, max: 1, step: 0.01, neutral: 0, modelValue, write: (value: number) => `${Math.round(value * 100)}` } })

describe('StepSlider', () => {
  it('is a range with a name and a spoken value', async () => {
    const slider = await mountSlider(0.25)
    const input = slider.get('input')
    expect([input.attributes('type'), input.attributes('aria-valuetext')]).toEqual(['range', '25'])
    expect(slider.get('label').attributes('for')).toBe(input.attributes('id'))
  })

  it.each([['ArrowRight', 0.35], ['ArrowUp', 0.35], ['ArrowLeft', 0.15], ['ArrowDown', 0.15]])('Shift and %s go ten steps', async (key, value) => {
    const slider = await mountSlider(0.25)
    await slider.get('input').trigger('keydown', { key, shiftKey: true })
    expect(slider.emitted('update:modelValue')).toEqual([[value]])
    expect(slider.emitted('settled')).toHaveLength(1)
  })

  it('stops at its end', async () => {
    const slider = await mountSlider(0.97)
    await slider.get('input').trigger('keydown', { key: 'ArrowRight', shiftKey: true })
    expect(slider.emitted('update:modelValue')).toEqual([[1]])
  })

  it.each(['Delete', 'Backspace'])('%s goes back to neutral', async (key) => {
    const slider = await mountSlider(0.25)
    await slider.get('input').trigger('keydown', { key })
    expect(slider.emitted('update:modelValue')).toEqual([[0]])
  })

  it('leaves the arrow alone without Shift: the browser’s own step', async () => {
    const slider = await mountSlider(0.25)
    await slider.get('input').trigger('keydown', { key: 'ArrowRight' })
    expect(slider.emitted('update:modelValue')).toBeUndefined()
  })
})
