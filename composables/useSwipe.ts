import { triptychStates, type TriptychState } from '~/utils/triptych'

/** Ties the triptych's scroll position on a phone to the state that is shown. */
export function useSwipe(screen: Readonly<Ref<HTMLElement | null>>, state: Ref<TriptychState>) {
  /** where the page itself is scrolling to; positions passed on the way are not states that somebody chose */
  let target: TriptychState | null = null
  const panelWidth = () => screen.value!.querySelector('.panel')!.clientWidth
  const isSwiped = () => screen.value !== null && screen.value.scrollWidth > screen.value.clientWidth + 1
  const shown = () => triptychStates[Math.round(screen.value!.scrollLeft / panelWidth())]

  function follow() {
    if (!isSwiped()) return
    const now = shown()
    if (target === null && now) state.value = now
    if (target === now) target = null
  }

  /** Shows a state, as a swipe would. */
  function goTo(next: TriptychState) {
    if (!isSwiped() || shown() === next) return
    target = next
    const isStill = matchMedia('(prefers-reduced-motion: reduce)').matches
    screen.value!.scrollTo({ left: triptychStates.indexOf(next) * panelWidth(), behavior: isStill ? 'instant' : 'smooth' })
  }

  /** A finger takes over from the page's own scrolling. */
  const takeOver = () => target = null

  return { follow, goTo, takeOver, isSwiped }
}
