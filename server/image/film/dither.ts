/**
 * Rows of 16-bit codes to 8 bit by error diffusion (R. W. Floyd and L. Steinberg, Proc. SID 17 (1976), 75–77), so that an
 * area keeps its mean; whole steps (no ink, full ink) stay exact. Rows must come in order; the same rows give the same bytes.
 */
export function makeDither(width: number, channels: number): (row: Uint16Array, to: Uint8Array) => void {
  const samples = width * channels
  // One pixel of room at both ends. Errors in 16-bit codes.
  let below = new Float32Array(samples + 2 * channels), here = new Float32Array(samples + 2 * channels)
  return (row, to) => {
    [here, below] = [below, here]
    below.fill(0)
    for (let c = 0; c < channels; c++) {
      let carried = 0
      for (let i = c, at = c + channels; i < samples; i += channels, at += channels) {
        const wanted = row[i]! + carried + here[at]!
        const code = wanted <= 0 ? 0 : wanted >= 65535 ? 255 : (wanted / 257 + 0.5) | 0
        to[i] = code
        const error = wanted - 257 * code
        carried = error * (7 / 16)
        below[at - channels]! += error * (3 / 16)
        below[at]! += error * (5 / 16)
        below[at + channels]! += error * (1 / 16)
      }
    }
  }
}
