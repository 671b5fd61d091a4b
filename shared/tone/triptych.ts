import { adjustedTones } from './adjustments'
import { buildForecastTable, buildLevelTable, type LevelSettings } from './levels'
import { buildPaletteTable, lightTableLightnesses, type PaletteKind } from './palettes'

export const triptychStates = ['photo', 'film', 'print'] as const
export type TriptychState = typeof triptychStates[number]

/**
 * How one state of the triptych shows each of the 65 536 tone codes, as L* (0 … 100): the adjusted photo, the film on a
 * light table, the forecast of the print.
 * @throws ComputeError as `buildLevelTable`.
 */
export function stateLightness(state: TriptychState, settings: LevelSettings): Float64Array {
  if (state === 'film') return lightTableLightnesses(buildLevelTable(settings))
  if (state === 'print') return buildForecastTable(settings)
  return adjustedTones(settings.adjustments).map(tone => 100 * tone)
}

/** The look of a state; prints have their process's, and in the dim room all are amber. */
export const stateLook = (state: TriptychState, printLook: PaletteKind): PaletteKind =>
  printLook === 'dim' || state === 'print' ? printLook : state

/**
 * Canvas pixels (little-endian RGBA) of one state for each tone code.
 * @throws ComputeError as `buildLevelTable`.
 */
export const statePixels = (state: TriptychState, settings: LevelSettings, printLook: PaletteKind): Uint32Array =>
  buildPaletteTable(stateLook(state, printLook), stateLightness(state, settings))
