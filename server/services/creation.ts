import { createHash } from 'node:crypto'
import { v7 as uuidv7 } from 'uuid'
import { ComputeError } from '#shared/errors'

/** The id a client handed in, or a fresh one. */
export const idFor = (body: { id?: string }): string => body.id ?? uuidv7()

/** SHA-256 of what was asked for, whatever the order of its fields; the id itself does not count. */
export function bodyHashOf({ id: _, ...body }: Record<string, unknown>): string {
  return createHash('sha256').update(canonicalJson(body)).digest('hex')
}

export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, inner: unknown) => inner && typeof inner === 'object' && !Array.isArray(inner)
    ? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => a < b ? -1 : 1))
    : inner)
}

/**
 * A creating request may come twice with the same id. `insert` gives the new row, or undefined when the id is there
 * already (`onConflictDoNothing` on the primary key); then `find` reads the stored one.
 * Same body: the stored record, `created: false`. Other body: 409 `id_taken`.
 */
export async function createOnce<Row extends { bodyHash: string }>(
  bodyHash: string, insert: () => Promise<Row | undefined>, find: () => Promise<Row | undefined>,
): Promise<{ created: boolean, row: Row }> {
  const row = await insert()
  if (row) return { created: true, row }
  const stored = await find()
  if (stored?.bodyHash !== bodyHash) throw new ComputeError('id_taken', 'Another record has this id already. Leave the id out, or make a new one.')
  return { created: false, row: stored }
}
