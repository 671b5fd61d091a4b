import { contract } from '#build/client-contract'
import type { Bench } from '#shared/schemas/benches'

/** Names of the studio's benches, for records that hold only an id. */
export function useBenchNames() {
  const { call } = useApi()
  const studio = useStudioStore()
  const benches = usePages<Bench>(cursor => call(contract.listBenches, { params: studio.params, query: { cursor, limit: 100 } }))
  const nameOf = (id: string) => benches.items.value.find(bench => bench.id === id)?.name
  return { read: benches.readAll, nameOf }
}
