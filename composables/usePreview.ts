import type { PreviewOrder, Reading, Summary } from '~/composables/preview/engine'
import type { PreviewAnswer, PreviewPart, PreviewRequest } from '~/composables/preview/messages'
import type { TriptychState } from '~/utils/triptych'

/**
 * The page's side of the preview: canvases, a picture and an order go to a worker, what it has drawn comes back as a summary.
 * A change of order costs the page one message; nothing is asked of the server.
 */
export function usePreview() {
  const summary = shallowRef<Summary | null>(null)
  const pictureEnds = shallowRef<[number, number]>([0, 1])
  const reading = shallowRef<Reading | null>(null)
  const worker = new Worker(new URL('./preview/preview.worker.ts', import.meta.url), { type: 'module' })
  const send = (request: PreviewRequest, moved: Transferable[] = []) => worker.postMessage(request, moved)

  worker.onmessage = ({ data }: MessageEvent<PreviewAnswer>) => {
    if (data.kind === 'reading') reading.value = data.reading
    else {
      summary.value = data.summary
      pictureEnds.value = data.pictureEnds
    }
  }
  onScopeDispose(() => worker.terminate())

  const given = new WeakSet<HTMLCanvasElement>()
  /** A canvas can be given away only once; it belongs to the worker afterwards. */
  function attach(state: TriptychState, canvas: unknown) {
    if (!(canvas instanceof HTMLCanvasElement) || given.has(canvas)) return
    given.add(canvas)
    const offscreen = canvas.transferControlToOffscreen()
    send({ kind: 'canvas', state, canvas: offscreen }, [offscreen])
  }

  /** Gives a picture away to the worker, and shows it. */
  const setSource = (picture: ProxyPicture, part: PreviewPart = 'whole') => send({ kind: 'source', part, ...picture }, [picture.channels])
  const show = (part: PreviewPart) => send({ kind: 'show', part })

  /** Reactive records cannot be sent: what is sent is a plain copy, and the long response itself. */
  function setOrder(order: PreviewOrder) {
    const { mix, ...points } = order.adjustments
    send({ kind: 'order', order: { ...order, adjustments: { ...points, mix: { ...mix } }, response: toRaw(order.response), colourPath: toRaw(order.colourPath) } })
  }
  const read = (spot: { x: number, y: number } | null) => send({ kind: 'read', spot })

  return { summary, pictureEnds, reading, attach, setSource, show, setOrder, read }
}
