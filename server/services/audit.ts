import type { Queryable } from '../db/client'
import { events } from '../db/schema'

export interface AuditEvent {
  studioId?: string
  userId?: string
  /** `record.verb`, as `bench.archived` */
  kind: string
  recordId?: string
  /** ids, states and figures: nothing that a person typed as private, no address */
  details?: Record<string, unknown>
}

/** Adds a line to the append-only audit trail, in the transaction of what it tells about. */
export async function recordEvent(on: Queryable, event: AuditEvent): Promise<void> {
  await on.insert(events).values(event)
}
