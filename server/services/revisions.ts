import { ComputeError } from '#shared/errors'

/** The row, read for update, when it is there and as the sender last saw it. Throws `not_found` or `stale_revision`. */
export function requireCurrent<Row extends { revision: number }>(row: Row | undefined, sentRevision: number): Row {
  const found = requireFound(row)
  if (found.revision !== sentRevision) {
    throw new ComputeError('stale_revision', 'Somebody has changed this in the meantime. Load it again, then make your change.',
      [{ path: 'revision', message: `It is at revision ${found.revision} now.` }])
  }
  return found
}

export function requireFound<Row>(row: Row | undefined): Row {
  if (!row) throw new ComputeError('not_found', 'There is nothing under this address.')
  return row
}
