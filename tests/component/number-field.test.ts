import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import NumberField from '../../components/ui/NumberField.vue'

const mountField = (props: Record<string, unknown> = {}) => mountSuspended(NumberField, { props: { label: 'Width', unit: 'mm', min: 5, max: 1500, modelValue: 180, ...props } })

describe('NumberField', () => {
  it.each([['12,5', 12.5], ['12.5', 12.5], [' 1 200 ', 1200], ['1\u202F200,25', 1200.25]])('takes %j as %d', async (text, figure) => {
    const field = await mountField()
    await field.get('input').setValue(text)
    expect(field.emitted('update:modelValue')!.at(-1)).toEqual([figure])
  })

  it.each([['1,200.5', 'Write a figure'], ['wide', 'Write a figure'], ['', 'A figure is needed'], ['4', 'At least 5 mm'], ['1500,5', 'At most 1500 mm'], ['NaN', 'Write a figure'], ['1e3', 'Write a figure']])('gives nothing on for %j, and says why', async (text, sentence) => {
    const field = await mountField()
    await field.get('input').setValue(text)
    expect(field.emitted('update:modelValue')).toBeUndefined()
    expect(field.get('[role=alert]').text()).toContain(sentence)
    expect(field.get('input').attributes('aria-invalid')).toBe('true')
  })

  it('leaves what is being typed alone, and writes it cleanly when it is left', async () => {
    const field = await mountField()
    const input = field.get('input')
    await input.setValue('12,50')
    await field.setProps({ modelValue: 12.5 })
    expect(input.element.value).toBe('12,50')
    await input.trigger('blur')
    expect(input.element.value).toBe('12.5')
  })

  it('steps with the arrow keys and stays within bounds', async () => {
    const field = await mountField({ modelValue: 1499.5 })
    await field.get('input').trigger('keydown', { key: 'ArrowUp' })
    expect(field.emitted('update:modelValue')!.at(-1)).toEqual([1500])
  })

  it('ties label, unit and input together', async () => {
    const field = await mountField()
    const input = field.get('input')
    expect(field.get('label').attributes('for')).toBe(input.attributes('id'))
    expect(field.get(`#${input.attributes('aria-describedby')}`).text()).toBe('mm')
  })
})
