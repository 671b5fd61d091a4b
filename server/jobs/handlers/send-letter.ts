import type { JobHandler } from '.'

/** The outbox's rows say all; the worker sends whichever is due longest. */
export const sendLetter: JobHandler<'send-letter'> = (_payload, { wake }) => wake('letters')
