import { fitCurve as fit } from '#shared/calibration/curve-fit'
import type { ImageCalls } from '../protocol'

/** No picture, but as long as one: a curve fitted here leaves the process that answers requests alone. */
export async function fitCurve({ readings, channel }: ImageCalls['fitCurve']['in']): Promise<ImageCalls['fitCurve']['out']> {
  return fit(readings, channel)
}
