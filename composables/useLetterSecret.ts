/** What a letter's link carries behind its #; taken out of the address at once, so that it stays in no history. */
export function useLetterSecret() {
  const secret = ref<string | null>(null)
  onMounted(() => {
    secret.value = location.hash.slice(1) || null
    if (secret.value) history.replaceState(history.state, '', location.pathname)
  })
  return secret
}
