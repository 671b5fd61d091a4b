import { contract } from '#build/client-contract'
import type { Bench } from '#shared/schemas/benches'
import type { Comparison } from '#shared/schemas/calibration'
import type { Curve } from '#shared/schemas/curves'

/** A bench beside another: what the service says of both, and their prints' own colours. The other one stands in the address. */
export function useComparison(benchId: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const route = useRoute()
  const router = useRouter()
  const benches = shallowRef<Bench[]>([])
  const comparison = shallowRef<Comparison | null>(null)
  const paths = shallowRef<Curve['colourPath'][]>([])
  const error = ref<string | null>(null)
  const other = computed({
    get: () => typeof route.query.with === 'string' ? route.query.with : '',
    set: id => void router.replace({ query: id ? { with: id } : {} }),
  })

  async function readBoth(id: string) {
    const answer = id ? await call(contract.compareBenches, { params: { ...studio.params, bench: benchId }, query: { with: id } }) : null
    const curves = await Promise.all(answer?.benches.map(({ curveId }) => call(contract.curve, { params: { ...studio.params, curve: curveId } })) ?? [])
    if (id !== other.value) return
    comparison.value = answer
    paths.value = curves.map(curve => curve.colourPath)
  }
  const reload = async () => (error.value = await sentenceIfFailed(() => readBoth(other.value)))
  watch(other, reload)

  async function read() {
    error.value = await sentenceIfFailed(async () => {
      benches.value = (await call(contract.listBenches, { params: studio.params, query: { limit: 100 } })).items
      await readBoth(other.value)
    })
  }
  useHints(['benches', 'curves'], reload)

  const bench = computed(() => benches.value.find(one => one.id === benchId) ?? null)
  const choices = computed(() => benches.value.filter(one => one.id !== benchId && one.curveInUse?.calibrated))
  return { bench, choices, other, comparison, paths, error, read }
}
