import type { ScanPicture } from './picture'

/** Pixels of the sample, at least this many for a judgement. */
const samplePixels = 400_000
const leastPixels = 50_000
/** Share of empty codes between the 2nd and the 98th percentile that tells of stretching: sound scans leave next to none. */
const greatestEmptyShare = 0.03

/**
 * True when an 8-bit picture's histogram has gaps as a stretch of its tones leaves them: codes that no pixel has, between codes
 * that many have, in a channel. 16-bit pictures and small ones are never judged.
 */
export function looksStretched({ codes, channels, width, height }: ScanPicture): boolean {
  if (codes instanceof Uint16Array || width * height < leastPixels) return false
  const channelsRead = channels === 1 ? [0] : [0, 1, 2]
  const step = Math.max(1, Math.floor(width * height / samplePixels)) | 1
  return channelsRead.some((channel) => {
    const bins = new Uint32Array(256)
    let total = 0
    for (let i = 0; i < width * height; i += step) {
      bins[codes[i * channels + channel]!]!++
      total++
    }
    return emptyShare(bins, total) > greatestEmptyShare
  })
}

/** Share of empty codes with both neighbours filled, between the 2nd and the 98th percentile. */
function emptyShare(bins: Uint32Array, total: number): number {
  let [low, high] = [0, 255]
  for (let seen = 0; seen + bins[low]! < 0.02 * total; low++) seen += bins[low]!
  for (let seen = 0; seen + bins[high]! < 0.02 * total; high--) seen += bins[high]!
  let gaps = 0
  const enough = total / 256 / 20
  for (let code = low + 1; code < high; code++) {
    if (bins[code]! < enough / 20 && bins[code - 1]! > enough && bins[code + 1]! > enough) gaps++
  }
  return gaps / Math.max(1, high - low - 1)
}
