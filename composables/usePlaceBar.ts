/** Lets a screen put the phone's bar of places away while one action fills the foot. */
export function usePlaceBar() {
  const isHidden = useState('place-bar-hidden', () => false)
  function hideWhile(condition: () => boolean) {
    watchEffect(() => isHidden.value = condition())
    onUnmounted(() => isHidden.value = false)
  }
  return { isHidden, hideWhile }
}
