/**
 * Rows of 16-bit codes to 8 bit by error diffusion (R. W. Floyd and L. Steinberg, Proc. SID 17 (1976), 75–77), so that an
 * area keeps its mean; whole steps (no ink, full ink) stay exact. Rows must come in order; the same rows give the same bytes.
 */
export function makeDither(width: number, channels: number): (row: Uint16Array, to: Uint8Array) => void {
  const samples = width * channels
  /** what each sample takes over from the row above, in 16-bit codes; rewritten for the next row behind the reading place */
  const passed = new Float64Array(samples)
  return (row, to) => {
    for (let c = 0; c < channels; c++) {
      let carried = 0, belowLeft = 0, below = 0
      for (let i = c; i < samples; i += channels) {
        const wanted = row[i]! + carried + passed[i]!
        const code = wanted <= 0 ? 0 : wanted >= 65535 ? 255 : (wanted * (1 / 257) + 0.5) | 0
        to[i] = code
        const error = wanted - 257 * code
        carried = error * (7 / 16)
        if (i >= channels) passed[i - channels] = belowLeft + error * (3 / 16)
        belowLeft = below + error * (5 / 16)
        below = error * (1 / 16)
      }
      passed[samples - channels + c] = belowLeft
    }
  }
}
