import { z } from 'zod'
import { limits } from './limits'

/** A record's id: a UUID; new ones are version 7, made by client or server. */
export const id = z.uuid()
/** An id that a client hands in for a record it creates (UUIDv7, RFC 9562). */
export const newId = z.uuidv7().optional()
export const name = z.string().trim().min(1, 'Give it a name.').max(limits.nameLength)
export const text = z.string().max(limits.textLength)
export const instant = z.iso.datetime({ offset: true })
export const revision = z.number().int().min(1)
export const fraction = z.number().min(0).max(1)
export const sideMm = z.number('A side is needed.').min(limits.sideMinMm).max(limits.sideMaxMm)

export const listQuery = z.strictObject({
  cursor: z.uuid().optional(),
  limit: z.coerce.number().int().min(1).max(limits.pageMax).default(50),
})

/** A list's answer: `items`, newest first, and the cursor of the next page or null. */
export const listOf = <T extends z.ZodType>(item: T) => z.object({ items: z.array(item), nextCursor: z.uuid().nullable() })

export const errorAnswer = z.object({
  statusCode: z.number().int(),
  statusMessage: z.string(),
  message: z.string(),
  data: z.object({ code: z.string(), issues: z.array(z.object({ path: z.string(), message: z.string() })).optional() }),
})
