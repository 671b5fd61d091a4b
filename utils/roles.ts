import type { Role } from '#shared/schemas/people'

export type { Role }

/** Least to most; the browser's own list, so that it need not carry the schemas. */
export const roles = ['member', 'technician', 'owner'] as const satisfies readonly Role[]
