import type { Aim } from '#shared/schemas/curves'

/** The aims in the order in which they are offered; the browser's own list, so that it need not carry the schemas. */
export const aims = ['keep-middle-tones', 'even-lightness', 'even-density'] as const satisfies readonly Aim[]
