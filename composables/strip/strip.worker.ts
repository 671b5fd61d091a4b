import { fitStrip, type StripOrder } from './fit-strip'

/** Fits strips off the page's own thread; a fit takes a second on a phone. */
onmessage = ({ data: { round, ...order } }: MessageEvent<StripOrder & { round: number }>) => postMessage({ round, fit: fitStrip(order) })
