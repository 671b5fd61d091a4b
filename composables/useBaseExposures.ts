import { contract } from '#build/client-contract'
import type { ExposureGoal } from '#shared/calibration/base-exposure'
import type { StripEntry } from '~/components/exposure/StripEntry.vue'

/** A bench's dated base exposures, newest first, and a new one from a strip. */
export function useBaseExposures(benchId: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, bench: benchId }
  const entries = usePages(cursor => call(contract.listBaseExposures, { params, query: { cursor, limit: 100 } }))
  useHints(['base-exposures'], entries.readAll)

  async function keep({ unit, readingId, points }: StripEntry, goal: ExposureGoal) {
    const values = points.map(({ exposure, lightness }) => ({ exposureSeconds: exposure, lightness }))
    await call(contract.createBaseExposure, { params, body: readingId ? { readingId, goal } : { values, unit, goal } })
    await entries.readAll()
  }

  return { entries, keep }
}
