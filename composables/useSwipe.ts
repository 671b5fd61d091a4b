import { triptychStates, type TriptychState } from '~/utils/triptych'

/** Ties the triptych's scroll position on a phone to the state that is shown. */
export function useSwipe(screen: Readonly<Ref<HTMLElement | null>>, state: Ref<TriptychState>) {
  const panelWidth = () => screen.value!.querySelector('.panel')!.clientWidth

  function follow() {
    if (!screen.value || screen.value.scrollWidth <= screen.value.clientWidth) return
    state.value = triptychStates[Math.round(screen.value.scrollLeft / panelWidth())] ?? state.value
  }

  /** Shows a state, as a swipe would. */
  function goTo(next: TriptychState) {
    state.value = next
    const isStill = matchMedia('(prefers-reduced-motion: reduce)').matches
    screen.value?.scrollTo({ left: triptychStates.indexOf(next) * panelWidth(), behavior: isStill ? 'instant' : 'smooth' })
  }

  return { follow, goTo }
}
