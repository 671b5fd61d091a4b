import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it, vi } from 'vitest'
import CornerHandles from '../../components/readings/CornerHandles.vue'
import type { Corner } from '../../utils/scan-corners'

const start: Corner[] = [[100, 50], [900, 50], [900, 550], [100, 550]]

/** A picture of 1000 × 600 pixels shown 500 px wide. */
async function mountHandles() {
  const shown = await mountSuspended(CornerHandles, {
    props: { 'width': 1000, 'height': 600, 'source': 'data:,', 'modelValue': start, 'onUpdate:modelValue': (corners: Corner[]) => shown.setProps({ modelValue: corners }) },
    attachTo: document.body,
  })
  vi.spyOn(shown.element as HTMLElement, 'getBoundingClientRect').mockReturnValue({ left: 0, top: 0, width: 500, height: 300 } as DOMRect)
  const handles = shown.findAll('button')
  for (const { element } of handles) Object.assign(element, { setPointerCapture: () => {}, hasPointerCapture: () => true })
  return { shown, handles, corners: () => shown.props('modelValue') as Corner[] }
}

describe('CornerHandles', () => {
  it('names its corners and where they are', async () => {
    const { handles } = await mountHandles()
    expect(handles.map(handle => handle.attributes('aria-label')!.split('.')[0])).toEqual(['Top left: 100, 50', 'Top right: 900, 50', 'Bottom right: 900, 550', 'Bottom left: 100, 550'])
  })

  it('moves a corner by as much as the finger moves, in pixels of the picture, wherever the ring was taken', async () => {
    const { handles, corners } = await mountHandles()
    await handles[1]!.trigger('pointerdown', { clientX: 460, clientY: 20, pointerId: 1 })
    await handles[1]!.trigger('pointermove', { clientX: 450, clientY: 32, pointerId: 1 })
    expect(corners()).toEqual([[100, 50], [880, 74], [900, 550], [100, 550]])
  })

  it('moves it by arrow keys, one pixel or ten', async () => {
    const { handles, corners } = await mountHandles()
    await handles[3]!.trigger('keydown', { key: 'ArrowUp' })
    await handles[3]!.trigger('keydown', { key: 'ArrowLeft', shiftKey: true })
    expect(corners()[3]).toEqual([90, 549])
  })

  it('shows a loupe over the corner that is held, and none otherwise', async () => {
    const { shown, handles } = await mountHandles()
    expect(shown.find('.loupe').exists()).toBe(false)
    await handles[0]!.trigger('focus')
    expect(shown.find('.loupe').exists()).toBe(true)
    await handles[0]!.trigger('blur')
    expect(shown.find('.loupe').exists()).toBe(false)
  })
})
