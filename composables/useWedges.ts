import { contract } from '#build/client-contract'
import type { z } from 'zod'
import type { Wedge, WedgeBrief, wedgeBody, wedgePrintBody, wedgePrintPatch, WedgePrintRecord } from '#shared/schemas/wedges'

export type WedgeOrder = z.input<typeof wedgeBody>

/** The wedges and guides of a bench, newest first. */
export function useWedges(benchId: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, bench: benchId }
  const wedges = usePages<WedgeBrief>(cursor => call(contract.listWedges, { params, query: { cursor, limit: 100 } }))
  useHints(['wedges', 'wedge-prints', 'renders'], wedges.readAll)

  async function create(order: WedgeOrder): Promise<Wedge> {
    const made = await call(contract.createWedge, { params, body: order })
    await wedges.readAll()
    return made
  }

  return { wedges: wedges.items, isRead: wedges.isRead, error: wedges.error, read: wedges.readAll, create }
}

/** The prints of one wedge, newest first; follows the wedge when another is chosen. */
export function useWedgePrints(wedgeId: () => string | undefined) {
  const { call } = useApi()
  const studio = useStudioStore()
  const paramsOf = (wedge: string) => ({ ...studio.params, wedge })
  const prints = usePages<WedgePrintRecord>(async (cursor) => {
    const wedge = wedgeId()
    return wedge ? call(contract.listWedgePrints, { params: paramsOf(wedge), query: { cursor, limit: 100 } }) : { items: [], nextCursor: null }
  })
  watch(wedgeId, prints.readAll)
  useHints(['wedge-prints'], prints.readAll)
  const nextNumber = computed(() => Math.max(0, ...prints.items.value.map(print => print.number)) + 1)

  async function add(body: z.input<typeof wedgePrintBody>): Promise<WedgePrintRecord> {
    const made = await call(contract.createWedgePrint, { params: paramsOf(wedgeId()!), body })
    await prints.readAll()
    return made
  }

  async function change(print: WedgePrintRecord, fields: Omit<z.input<typeof wedgePrintPatch>, 'revision'>) {
    await call(contract.changeWedgePrint, { params: { ...studio.params, print: print.id }, body: { revision: print.revision, ...fields } })
    await prints.readAll()
  }

  return { prints: prints.items, isRead: prints.isRead, error: prints.error, read: prints.readAll, nextNumber, add, change }
}
