import type { JobHandler } from '.'

/** The render's row says all; the worker takes up whichever has waited longest. */
export const makeRender: JobHandler<'make-render'> = (_payload, { wake }) => wake('films')
