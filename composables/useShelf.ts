import { contract } from '#build/client-contract'
import type { ShelfItem, ShelfKind } from '#shared/schemas/shelf'

/** One drawer of the shelf. */
export function useDrawer(kind: ShelfKind) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, shelf: kind }
  const pages = usePages<ShelfItem>(cursor => call(contract.listShelf, { params, query: { cursor, limit: 100 } }))

  async function add(name: string, notes?: string) {
    const item = await call(contract.createShelfItem, { params, body: { name, notes } })
    pages.items.value = [item, ...pages.items.value]
    return item
  }

  async function change(item: ShelfItem, fields: { name?: string, notes?: string }) {
    const changed = await call(contract.changeShelfItem, { params: { ...params, item: item.id }, body: { ...fields, revision: item.revision } })
    pages.items.value = pages.items.value.map(other => other.id === changed.id ? changed : other)
  }

  async function archive(item: ShelfItem) {
    await call(contract.archiveShelfItem, { params: { ...params, item: item.id }, body: { revision: item.revision } })
    pages.items.value = pages.items.value.filter(other => other.id !== item.id)
  }

  useHints([kind], pages.readAll)
  return { items: pages.items, isRead: pages.isRead, error: pages.error, read: pages.readAll, add, change, archive }
}

/** The drawers that a bench is put together from. */
export function useBenchShelf() {
  const drawers = { paperId: useDrawer('papers'), sensitizerId: useDrawer('sensitizers'), filmId: useDrawer('films'), inkjetId: useDrawer('inkjets'), lampId: useDrawer('lamps') }
  const read = () => Promise.all(Object.values(drawers).map(drawer => drawer.read()))
  return { drawers, read }
}

/** Names of shelf things by id, also of those that have been taken off the shelf since. */
export function useShelfNames() {
  const { call } = useApi()
  const studio = useStudioStore()
  const names = shallowReactive(new Map<string, string>())
  const kinds = { paperId: 'papers', sensitizerId: 'sensitizers', filmId: 'films', inkjetId: 'inkjets', lampId: 'lamps' } as const

  async function read(record: { [K in keyof typeof kinds]: string | null }) {
    const wanted = Object.entries(kinds).flatMap(([field, shelf]) => {
      const item = record[field as keyof typeof kinds]
      return item && !names.has(item) ? [{ shelf, item }] : []
    })
    await Promise.all(wanted.map(async ({ shelf, item }) => {
      const { name } = await call(contract.shelfItem, { params: { ...studio.params, shelf, item } })
      names.set(item, name)
    }))
  }

  const nameOf = (id: string | null) => id && (names.get(id) ?? null)
  return { read, nameOf }
}
