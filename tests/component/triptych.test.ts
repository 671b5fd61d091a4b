import { mountSuspended } from '@nuxt/test-utils/runtime'
import type { DOMWrapper } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { h } from 'vue'
import Triptych from '../../components/triptych/Triptych.vue'

const pictures = { photo: '/photo.jpg', film: '/film.png', print: '/print.png', alt: 'a flowering branch' }
const canvases = { photo: () => h('canvas'), film: () => h('canvas'), print: () => h('canvas') }

const styleOf = (spot: DOMWrapper<Element>) => (spot.element as unknown as HTMLElement).style

describe('Triptych', () => {
  it('shows photo, film and print in this order, and describes the picture once', async () => {
    const triptych = await mountSuspended(Triptych, { props: pictures })
    expect(triptych.findAll('img').map(img => [img.attributes('src'), img.attributes('alt')])).toEqual([
      ['/photo.jpg', 'a flowering branch'], ['/film.png', ''], ['/print.png', ''],
    ])
  })

  it('lets what is not there yet stand empty', async () => {
    const triptych = await mountSuspended(Triptych, { props: { photo: '/photo.jpg', alt: 'a branch' } })
    expect(triptych.findAll('.panel').map(panel => panel.classes('blank'))).toEqual([false, true, true])
  })

  it('marks the same spot in all three states, mirrored on the film', async () => {
    const triptych = await mountSuspended(Triptych, { props: { size: 'large', spot: { x: 0.2, y: 0.75 } }, slots: canvases })
    expect(triptych.findAll('.spot').map(spot => [styleOf(spot).left, styleOf(spot).top])).toEqual([['20%', '75%'], ['80%', '75%'], ['20%', '75%']])
  })

  it('does not mirror the spot on a film that is not mirrored', async () => {
    const triptych = await mountSuspended(Triptych, { props: { size: 'large', mirrored: false, spot: { x: 0.2, y: 0.5 } }, slots: canvases })
    expect(triptych.findAll('.spot').map(spot => styleOf(spot).left)).toEqual(['20%', '20%', '20%'])
  })

  it('tells the spot under the pointer in the print’s own direction', async () => {
    const triptych = await mountSuspended(Triptych, { props: { size: 'large' }, slots: canvases })
    const film = triptych.findAll('.panel')[1]!
    film.element.getBoundingClientRect = () => ({ left: 100, top: 50, width: 200, height: 100 }) as DOMRect
    await film.trigger('pointermove', { clientX: 140, clientY: 75 })
    expect(triptych.emitted('point')).toEqual([[{ x: 0.8, y: 0.25 }]])
    await film.trigger('pointerleave')
    expect(triptych.emitted('point')!.at(-1)).toEqual([null])
  })

  it('moves the spot by keyboard and puts it away with Escape', async () => {
    const triptych = await mountSuspended(Triptych, { props: { size: 'large', spot: { x: 0.5, y: 0.5 } }, slots: canvases })
    await triptych.get('.tri').trigger('keydown', { key: 'ArrowRight' })
    await triptych.get('.tri').trigger('keydown', { key: 'Escape' })
    expect(triptych.emitted('point')).toEqual([[{ x: 0.52, y: 0.5 }], [null]])
  })
})
