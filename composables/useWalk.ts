import { contract } from '#build/client-contract'
import type { Walk, WalkStep } from '#shared/schemas/calibration'

type StepRecord = Walk['steps'][number]
export interface StepSaid { state?: StepRecord['state'] | null, clockSeconds?: number | null, notes?: string }

/** How far a bench's calibration has come; changes of other devices arrive by themselves. */
export function useWalk(benchId: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, bench: benchId }
  const walk = shallowRef<Walk | null>(null)
  const error = ref<string | null>(null)

  const reload = async () => (error.value = await sentenceIfFailed(async () => walk.value = await call(contract.walk, { params })))
  useHints(['walk', 'benches', 'base-exposures', 'wedges', 'wedge-prints', 'readings', 'curves'], reload)

  const stepOf = (step: WalkStep) => walk.value?.steps.find(one => one.step === step)

  /** Answers whether it was kept; what somebody else said in the meantime is shown before one says it again. */
  async function say(step: WalkStep, said: StepSaid): Promise<boolean> {
    const problem = await sentenceIfFailed(async () => {
      walk.value = await call(contract.changeWalkStep, { params: { ...params, step }, body: { revision: stepOf(step)?.revision ?? 0, ...said } })
    })
    if (problem) await reload()
    error.value = problem
    return problem === null
  }

  return { walk, error, reload, stepOf, say }
}
