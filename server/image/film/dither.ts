/**
 * Rows of 16-bit codes to 8 bit by error diffusion (R. W. Floyd and L. Steinberg, Proc. SID 17 (1976), 75–77), so that an
 * area keeps its mean; whole steps (no ink, full ink) stay exact. Rows must come in order; the same rows give the same bytes.
 */
export function makeDither(width: number, channels: number): (row: Uint16Array, to: Uint8Array) => void {
  const samples = width * channels
  /**
   * What each sample takes over from the row above, in 16-bit codes, after one pixel of room; rewritten for the next row
   * behind the reading place. Whole numbers: every share is rounded and the last takes the rest, so that nothing is lost.
   */
  const passed = new Int16Array(samples + channels)
  return (row, to) => {
    for (let c = 0; c < channels; c++) {
      let carried = 0, belowLeft = 0, below = 0
      for (let i = c; i < samples; i += channels) {
        const wanted = (row[i]! + carried + passed[i + channels]!) | 0
        // (w + 128) · 255 / 65536 is w / 257 + ½ within 0.002, and exact at whole steps
        const code = wanted <= 0 ? 0 : wanted >= 65535 ? 255 : ((wanted + 128) * 255) >> 16
        to[i] = code
        const error = (wanted - ((code << 8) + code)) | 0
        const right = (error * 7) >> 4, left = (error * 3) >> 4, straight = (error * 5) >> 4
        carried = right
        passed[i] = belowLeft + left
        belowLeft = below + straight
        below = error - right - left - straight
      }
      passed[samples + c] = belowLeft
    }
  }
}
