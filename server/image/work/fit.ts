import { fitResponse } from '#shared/calibration/response-fit'
import type { ImageCalls } from '../protocol'

/** No picture, but as long as one: a curve fitted here leaves the process that answers requests alone. */
export async function fitCurve({ points, prints }: ImageCalls['fitResponse']['in']): Promise<ImageCalls['fitResponse']['out']> {
  return fitResponse(points, { prints })
}
