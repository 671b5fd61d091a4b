import { contract } from '#build/client-contract'
import type { Findings } from '#shared/schemas/findings'

/** What a reading tells besides its patches; asked for again when another reading, or its state, is shown. */
export function useFindings(reading: () => { id: string, state: string } | null) {
  const { call } = useApi()
  const studio = useStudioStore()
  const findings = shallowRef<Findings | null>(null)
  const error = ref<string | null>(null)
  watch(() => ({ ...reading() }), async ({ id, state }) => {
    findings.value = null
    if (!id || state !== 'ready') return
    error.value = await sentenceIfFailed(async () => {
      const answer = await call(contract.findings, { params: { ...studio.params, reading: id } })
      if (id === reading()?.id) findings.value = answer
    })
  }, { immediate: true })
  return { findings, error }
}
