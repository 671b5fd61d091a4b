import { contract } from '#build/client-contract'
import { drawerWords } from '~/utils/shelf-words'
import type { ShelfItem, ShelfKind, ShelfRecord } from '#shared/schemas/shelf'
import type { Bench } from '#shared/schemas/benches'
import { writtenFacts, type ShelfDraft } from '~/utils/shelf-draft'

/** One drawer of the shelf. */
export function useDrawer(kind: ShelfKind) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, shelf: kind }
  const pages = usePages<ShelfItem>(cursor => call(contract.listShelf, { params, query: { cursor, limit: 100 } }))

  async function add(name: string) {
    const item = await call(contract.createShelfItem, { params, body: { name } })
    pages.items.value = [item, ...pages.items.value]
    return item
  }

  useHints([kind], pages.readAll)
  return { items: pages.items, isRead: pages.isRead, error: pages.error, read: pages.readAll, add }
}

/** The whole shelf, or what holds all of some words; `off`: what was taken off it. */
export function useShelfSearch(wanted: () => { words: string, off: boolean }) {
  const { call } = useApi()
  const studio = useStudioStore()
  const pages = usePages<ShelfItem>((cursor) => {
    const { words, off } = wanted()
    return call(contract.searchShelf, { params: studio.params, query: { cursor, limit: 100, words: words || undefined, archived: off ? 'true' : undefined } })
  })
  useHints(Object.keys(drawerWords), pages.readAll)
  return pages
}

/** One thing's record: what is known of it, where it is used, and what is done with it. */
export function useShelfRecord(kind: ShelfKind, id?: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const drawer = { ...studio.params, shelf: kind }
  const params = { ...drawer, item: id ?? '' }
  const record = shallowRef<ShelfRecord | null>(null)
  const error = ref<string | null>(null)
  const bodyOf = (draft: ShelfDraft) => ({ name: draft.name, notes: draft.notes, facts: writtenFacts(kind, draft) })

  const reload = async () => (error.value = await sentenceIfFailed(async () => (record.value = await call(contract.shelfItem, { params }))))
  const create = (draft: ShelfDraft) => call(contract.createShelfItem, { params: drawer, body: bodyOf(draft) })
  const change = (draft: ShelfDraft, revision: number) => call(contract.changeShelfItem, { params, body: { ...bodyOf(draft), revision } })
  async function move(to: 'archiveShelfItem' | 'restoreShelfItem') {
    await call(contract[to], { params, body: { revision: record.value!.revision } })
    await reload()
  }
  return { record, error, reload, create, change, takeOff: () => move('archiveShelfItem'), putBack: () => move('restoreShelfItem') }
}

/** The drawers that a bench is put together from. */
export function useBenchShelf() {
  const drawers = { paperId: useDrawer('papers'), sensitizerId: useDrawer('sensitizers'), filmId: useDrawer('films'), inkjetId: useDrawer('inkjets'), lampId: useDrawer('lamps') }
  const read = () => Promise.all(Object.values(drawers).map(drawer => drawer.read()))
  return { drawers, read }
}

const drawerOf = { paperId: 'papers', sensitizerId: 'sensitizers', filmId: 'films', inkjetId: 'inkjets', lampId: 'lamps' } as const
type MaterialIds = Pick<Bench, keyof typeof drawerOf>

/** What a bench is put together from, by id, also what has been taken off the shelf since. */
export function useBenchMaterials() {
  const { call } = useApi()
  const studio = useStudioStore()
  const items = shallowReactive(new Map<string, ShelfItem>())

  async function read(bench: MaterialIds) {
    await Promise.all(Object.entries(drawerOf).map(async ([field, shelf]) => {
      const item = bench[field as keyof MaterialIds]
      if (item) items.set(item, await call(contract.shelfItem, { params: { ...studio.params, shelf, item } }))
    }))
  }

  const itemOf = (id: string | null) => (id && items.get(id)) || null
  return { read, itemOf }
}
