import { contract } from '#build/client-contract'
import type { Reading } from '#shared/schemas/curves'
import type { Wedge } from '#shared/schemas/wedges'
import type { ExposureUnit } from '~/utils/exposure-strip'

export interface StripReading { reading: Reading, unit: ExposureUnit, /** what each patch got in all */ exposures: (number | undefined)[] }

/** Scans of exposure strips among a bench's readings, with the exposure of each place from the guide. */
export function useStripReadings(benchId: string, readings: Readonly<Ref<Reading[]>>) {
  const { call } = useApi()
  const studio = useStudioStore()
  const guides = shallowRef<Wedge[]>([])

  async function read() {
    const { items } = await call(contract.listWedges, { params: { ...studio.params, bench: benchId }, query: { kind: 'exposure-strip', limit: 100 } })
    guides.value = await Promise.all(items.map(({ id }) => call(contract.wedge, { params: { ...studio.params, wedge: id } })))
  }

  const strips = computed<StripReading[]>(() => readings.value.flatMap((reading) => {
    const guide = guides.value.find(one => one.id === reading.wedgeId)
    return guide && reading.state === 'ready' ? [{ reading, unit: guide.exposureUnit ?? 's', exposures: guide.patches.map(patch => patch.exposure) }] : []
  }))
  return { strips, read }
}
