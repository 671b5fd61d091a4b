import type { ShelfItem, ShelfKind } from '#shared/schemas/shelf'

/** Keeps what a form of the shelf holds, says beside the fields what cannot be kept, and goes to the record. */
export function useShelfKeeping(kind: () => ShelfKind) {
  const studio = useStudioStore()
  const problem = shallowRef<unknown>(null)
  const isBusy = ref(false)
  const form = useTemplateRef<HTMLFormElement>('form')
  const issueOf = (path: string) => problem.value instanceof ApiError ? problem.value.issueOf(path) : undefined

  /** A figure that cannot be read is not given on by its field: it is gone to, instead of keeping the one before. */
  async function keep(save: () => Promise<ShelfItem>) {
    problem.value = null
    await nextTick()
    if (goToUnread()) return
    isBusy.value = true
    try {
      const item = await save()
      await navigateTo(studio.to(`shelf/${kind()}/${item.id}`), { replace: true })
    }
    catch (error) {
      problem.value = error
      await nextTick()
      goToUnread()
    }
    isBusy.value = false
  }

  function goToUnread(): boolean {
    const field = form.value?.querySelector<HTMLElement>('[aria-invalid=true]')
    const folded = field?.closest('details')
    if (folded) folded.open = true
    field?.focus()
    return Boolean(field)
  }

  return { problem, isBusy, issueOf, keep }
}
