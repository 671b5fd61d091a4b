import { contract } from '#shared/schemas/contract'
import type { Endpoint } from '#shared/schemas/endpoint'
import { shelfKinds } from '#shared/schemas/shelf'

const rows: readonly Endpoint[] = Object.values(contract)
const patterns = new Map(rows.map(row => [row.path, pathPattern(row.path)]))

/** `:name` stands for one segment; the shelf's drawers are a fixed set of names. */
function pathPattern(path: string): RegExp {
  return new RegExp(`^${path.replaceAll('.', '\\.').replaceAll(/:(\w+)/g, (_, name) => name === 'shelf' ? `(?:${shelfKinds.join('|')})` : '[^/]+')}$`)
}

/** The contract's methods for a path; none where the contract has no such path. */
export function methodsOf(path: string): Endpoint['method'][] {
  return rows.filter(row => patterns.get(row.path)!.test(path)).map(row => row.method)
}
