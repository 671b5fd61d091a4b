import { contract } from '#build/client-contract'
import type { Crop } from '#shared/sheet/crop'

/** Working-space channels of a part of a photo, as the server made them. */
export interface ProxyPicture { channels: ArrayBuffer, width: number, height: number }

export interface ProxyGeometry { quarterTurns: number, straightenDegrees: number, crop: Crop }

/** Fetches the preview's picture; a newer request drops the one before. */
export function useProxy() {
  const { fetchFile } = useApi()
  const studio = useStudioStore()
  let running: AbortController | undefined

  /** Exactly width × height pixels of the crop. Null when a newer request has overtaken this one. */
  async function fetchProxy(photo: string, { quarterTurns, straightenDegrees, crop }: ProxyGeometry, width: number, height: number): Promise<ProxyPicture | null> {
    running?.abort()
    const { signal } = running = new AbortController()
    const region = [crop.x, crop.y, crop.width, crop.height].map(share => share.toFixed(9)).join(',')
    try {
      const answer = await fetchFile(contract.photoProxy, { params: { ...studio.params, photo }, query: { width, height, region, quarterTurns, straightenDegrees }, signal })
      return { channels: await answer.arrayBuffer(), width: Number(answer.headers.get('x-width')), height: Number(answer.headers.get('x-height')) }
    }
    catch (error) {
      if (signal.aborted) return null
      throw error
    }
  }
  onScopeDispose(() => running?.abort())

  return { fetchProxy }
}

/** The longer side of a preview, pixels a state. */
export const previewPixels = 1200

/** Pixels of a preview of this shape, its longer side `longer`. */
export function previewSize(shape: number, longer = previewPixels): { width: number, height: number } {
  return shape >= 1
    ? { width: longer, height: Math.max(16, Math.round(longer / shape)) }
    : { width: Math.max(16, Math.round(longer * shape)), height: longer }
}
