/** The present instant, each second anew while the component lives; at once when the page comes back into view. */
export function useNow() {
  const now = ref(Date.now())
  const look = () => (now.value = Date.now())
  let beat: ReturnType<typeof setInterval> | undefined
  onMounted(() => {
    beat = setInterval(look, 1000)
    document.addEventListener('visibilitychange', look)
  })
  onBeforeUnmount(() => {
    clearInterval(beat)
    document.removeEventListener('visibilitychange', look)
  })
  return now
}
