import { contract } from '#build/client-contract'
import type { Reading } from '#shared/schemas/curves'
import type { Wedge, WedgeKind } from '#shared/schemas/wedges'

export interface GuideReading { reading: Reading, guide: Wedge }

/** The finished scans of one kind of guide among a bench's readings, each with its guide: what every place of it got or holds. */
export function useGuideReadings(benchId: string, kind: WedgeKind, readings: Readonly<Ref<Reading[]>>) {
  const { call } = useApi()
  const studio = useStudioStore()
  const guides = shallowRef<Wedge[]>([])

  async function read() {
    const { items } = await call(contract.listWedges, { params: { ...studio.params, bench: benchId }, query: { kind, limit: 100 } })
    guides.value = await Promise.all(items.map(({ id }) => call(contract.wedge, { params: { ...studio.params, wedge: id } })))
  }

  const scans = computed<GuideReading[]>(() => readings.value.flatMap((reading) => {
    const guide = guides.value.find(one => one.id === reading.wedgeId)
    return guide && reading.state === 'ready' ? [{ reading, guide }] : []
  }))
  return { scans, read }
}
