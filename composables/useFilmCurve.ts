import { contract } from '#build/client-contract'
import type { Bench } from '#shared/schemas/benches'
import type { FilmDensities } from '#shared/schemas/calibration'

export interface KnownFilm { bench: Bench, film: FilmDensities }

/** Film densities found on other benches with this one's film, ink, lamp and process: with a tablet's print alone they make a curve here. */
export function useFilmCurve(bench: () => Bench | null) {
  const { call } = useApi()
  const studio = useStudioStore()
  const known = shallowRef<KnownFilm[]>([])

  async function read() {
    const here = bench()
    if (!here) return
    const { items } = await call(contract.listBenches, { params: studio.params, query: { limit: 100 } })
    const alike = items.filter(other => other.id !== here.id && !other.starter && sharesFilmSide(other, here))
    const lists = await Promise.all(alike.map(async other => ({ other, films: (await call(contract.listFilmDensities, { params: { ...studio.params, bench: other.id }, query: { limit: 1 } })).items })))
    known.value = lists.flatMap(({ other, films }) => films.map(film => ({ bench: other, film })))
  }

  const make = (tabletId: string, filmDensitiesId: string) => call(contract.filmCurve, { params: { ...studio.params, bench: bench()!.id, tablet: tabletId }, body: { filmDensitiesId } })
  return { known, read, make }
}

/** The service looks at the path, too, and says what differs. */
const sharesFilmSide = (a: Bench, b: Bench) => a.process === b.process && a.filmId === b.filmId && a.lampId === b.lampId && a.ink.color.toLowerCase() === b.ink.color.toLowerCase()
