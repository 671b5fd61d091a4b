import { contract } from '#build/client-contract'
import type { z } from 'zod'
import type { FilmDensities, Tablet, tabletBody } from '#shared/schemas/calibration'

/** Step tablets printed on a bench, newest first, and what has been found about its film with them. */
export function useTablets(benchId: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, bench: benchId }
  const tablets = usePages<Tablet>(cursor => call(contract.listTablets, { params, query: { cursor, limit: 100 } }))
  const films = usePages<FilmDensities>(cursor => call(contract.listFilmDensities, { params, query: { cursor, limit: 100 } }))
  const read = () => Promise.all([tablets.readAll(), films.readAll()])
  useHints(['tablets', 'film-densities'], read)

  async function keep(body: z.input<typeof tabletBody>): Promise<Tablet> {
    const kept = await call(contract.createTablet, { params, body })
    await tablets.readAll()
    return kept
  }

  async function split(tabletId: string, curveId: string) {
    await call(contract.createFilmDensities, { params, body: { tabletId, curveId } })
    await films.readAll()
  }

  return { tablets: tablets.items, films: films.items, error: computed(() => tablets.error.value ?? films.error.value), read, keep, split }
}
