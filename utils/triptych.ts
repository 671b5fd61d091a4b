export const triptychStates = ['photo', 'film', 'print'] as const
export type TriptychState = typeof triptychStates[number]
export const stateNames: Record<TriptychState, string> = { photo: 'Photo', film: 'Film', print: 'Print' }
