import { noFit, type StripFit, type StripOrder } from '~/composables/strip/fit-strip'

/** The base exposure of what is typed so far, by the same functions as the service’s, a moment after the last change. */
export function useStripFit(order: () => StripOrder) {
  const fit = shallowRef<StripFit>(noFit)
  const isFitting = ref(false)
  const worker = new Worker(new URL('./strip/strip.worker.ts', import.meta.url), { type: 'module' })
  let round = 0
  let waiting: ReturnType<typeof setTimeout> | undefined

  worker.onmessage = ({ data }: MessageEvent<{ round: number, fit: StripFit }>) => {
    if (data.round !== round) return
    fit.value = data.fit
    isFitting.value = false
  }
  watch(order, (now) => {
    clearTimeout(waiting)
    isFitting.value = true
    // Reactive records cannot be sent: what is sent is a plain copy.
    waiting = setTimeout(() => worker.postMessage({ round: ++round, points: now.points.map(point => ({ ...point })), goal: { ...now.goal } }), 300)
  }, { immediate: true, deep: true })
  onScopeDispose(() => {
    clearTimeout(waiting)
    worker.terminate()
  })
  return { fit, isFitting }
}
