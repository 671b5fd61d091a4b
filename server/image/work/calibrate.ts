import { findBaseExposure } from '#shared/calibration/base-exposure'
import { checkCurve } from '#shared/calibration/curve-check'
import { evennessOf } from '#shared/calibration/evenness'
import { responseThroughFilm, splitFilmFromPaper } from '#shared/calibration/film-densities'
import { flatFieldFit } from '#shared/calibration/flat-field-fit'
import { readInkTrial } from '#shared/calibration/ink-trial'
import type { ImageCalls } from '../protocol'

type Calls = Pick<ImageCalls, 'findBaseExposure' | 'splitFilm' | 'curveThroughFilm' | 'evenness' | 'checkCurve' | 'readInkTrial'>

/** No pictures, but as long as some: what a bench's figures are found from, off the process that answers requests. */
export const calibrate: { [K in keyof Calls]: (input: Calls[K]['in']) => Promise<Calls[K]['out']> } = {
  findBaseExposure: async ({ values, goal }) => findBaseExposure(values, goal),
  splitFilm: async ({ wedge, steps }) => splitFilmFromPaper(wedge, steps),
  curveThroughFilm: async ({ film, steps }) => {
    const { response, low, high } = responseThroughFilm(film, steps)
    return { response: [...response], low: [...low], high: [...high] }
  },
  evenness: async ({ patches }) => evennessOf(patches, flatFieldFit([patches]).response),
  checkCurve: async ({ patches, curve }) => checkCurve(patches, curve),
  readInkTrial: async ({ patches, names, foilLightness }) => readInkTrial(patches, names, foilLightness),
}
