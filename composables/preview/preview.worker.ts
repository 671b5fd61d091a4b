import type { TriptychState } from '../../utils/triptych'
import { PreviewEngine } from './engine'
import type { PreviewAnswer, PreviewPart, PreviewRequest } from './messages'

/** Draws the triptych off the page's own thread. While slides come faster than pictures, only the newest is drawn. */
const engines: Record<PreviewPart, PreviewEngine> = { whole: new PreviewEngine(), detail: new PreviewEngine() }
let shown: PreviewPart = 'whole'
const canvases = new Map<TriptychState, OffscreenCanvas>()
let spot: { x: number, y: number } | null = null
let newest: Extract<PreviewRequest, { kind: 'order' }> | undefined
let isPlanned = false

const answer = (message: PreviewAnswer) => postMessage(message)

onmessage = ({ data }: MessageEvent<PreviewRequest>) => {
  if (data.kind === 'canvas') canvases.set(data.state, data.canvas)
  if (data.kind === 'source') engines[data.part].setSource(new Uint16Array(data.channels), data.width, data.height)
  if (data.kind === 'source' || data.kind === 'show') shown = data.part
  if (data.kind === 'order') newest = data
  if (data.kind === 'read') {
    spot = data.spot
    return tellReading()
  }
  if (isPlanned) return
  isPlanned = true
  setTimeout(drawNewest)
}

function drawNewest() {
  isPlanned = false
  if (newest) for (const engine of Object.values(engines)) engine.setOrder(newest.order)
  newest = undefined
  const { whole } = engines
  if (engines[shown].isReady) for (const [state, canvas] of canvases) draw(engines[shown], state, canvas)
  if (!whole.isReady) return
  answer({ kind: 'drawn', summary: whole.summary(), pictureEnds: whole.pictureEnds() })
  tellReading()
}

function draw(engine: PreviewEngine, state: TriptychState, canvas: OffscreenCanvas) {
  const { width, height } = engine
  if (canvas.width !== width || canvas.height !== height) Object.assign(canvas, { width, height })
  const image = new ImageData(width, height)
  engine.draw(state, new Uint32Array(image.data.buffer))
  canvas.getContext('2d')!.putImageData(image, 0, 0)
}

function tellReading() {
  const engine = engines[shown]
  if (engine.isReady) answer({ kind: 'reading', reading: spot && engine.read(spot.x, spot.y) })
}
