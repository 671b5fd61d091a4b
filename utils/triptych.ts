import type { TriptychState } from '#shared/tone/triptych'

export { triptychStates, type TriptychState } from '#shared/tone/triptych'
export const stateNames: Record<TriptychState, string> = { photo: 'Photo', film: 'Film', print: 'Print' }
