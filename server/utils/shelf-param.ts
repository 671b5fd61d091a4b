import type { H3Event } from 'h3'
import { getRouterParam } from 'h3'
import { ComputeError } from '#shared/errors'
import { shelfKind, type ShelfKind } from '#shared/schemas/shelf'

/** Which drawer the path names; there are six, anything else is nowhere. */
export function shelfParam(event: H3Event): ShelfKind {
  const parsed = shelfKind.safeParse(getRouterParam(event, 'shelf'))
  if (!parsed.success) throw new ComputeError('not_found', 'There is nothing under this address.')
  return parsed.data
}
