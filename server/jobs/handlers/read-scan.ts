import type { JobHandler } from '.'

/** The reading's row says all; the worker takes up whichever has waited longest. */
export const readScan: JobHandler<'read-scan'> = (_payload, { wake }) => wake('readings')
