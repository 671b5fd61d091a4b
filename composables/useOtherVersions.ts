import { contract } from '#build/client-contract'
import type { Curve } from '#shared/schemas/curves'

/** Other versions of a curve, read when they are to be laid beside the one that is shown. */
export function useOtherVersions() {
  const { call } = useApi()
  const studio = useStudioStore()
  const chosen = ref<string[]>([])
  const read = shallowReactive(new Map<string, Curve>())
  const error = ref<string | null>(null)

  async function toggle(id: string) {
    chosen.value = chosen.value.includes(id) ? chosen.value.filter(other => other !== id) : [...chosen.value, id]
    if (!read.has(id)) error.value = await sentenceIfFailed(async () => read.set(id, await call(contract.curve, { params: { ...studio.params, curve: id } })))
  }

  const shown = computed(() => chosen.value.flatMap(id => read.get(id) ?? []).map(curve => ({ name: `curve ${curve.version}`, curve })))
  return { chosen, toggle, shown, error }
}
