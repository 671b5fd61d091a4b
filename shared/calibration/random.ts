/** Numbers that look random and come again the same from the same seed. */
export interface SeededRandom {
  /** 0 ≤ u < 1 */
  uniform: () => number
  /** 0 ≤ integer < `count` */
  below: (count: number) => number
  /** standard normal */
  normal: () => number
}

/**
 * A generator of its own for each seed (a 32-bit integer): sfc32 (C. Doty-Humphrey, PractRand), all 32-bit integer steps, so
 * it gives the same numbers on every machine. Normals by Marsaglia's polar method, SIAM Review 6(3):260–264, 1964.
 */
export function seededRandom(seed: number): SeededRandom {
  let [a, b, c, counter] = [seed | 0, 0x9E3779B9 | 0, 0x243F6A88, 1]
  const next = (): number => {
    const t = (((a + b) | 0) + counter) | 0
    counter = (counter + 1) | 0
    a = b ^ (b >>> 9)
    b = (c + (c << 3)) | 0
    c = (c << 21) | (c >>> 11)
    c = (c + t) | 0
    return t >>> 0
  }
  for (let i = 0; i < 20; i++) next()
  const uniform = (): number => next() / 4294967296
  return { uniform, below: count => Math.floor(uniform() * count), normal: normals(uniform) }
}

function normals(uniform: () => number): () => number {
  let spare: number | undefined
  return () => {
    if (spare !== undefined) {
      const value = spare
      spare = undefined
      return value
    }
    for (;;) {
      const [x, y] = [2 * uniform() - 1, 2 * uniform() - 1]
      const square = x * x + y * y
      if (square >= 1 || square === 0) continue
      const scale = Math.sqrt(-2 * Math.log(square) / square)
      spare = y * scale
      return x * scale
    }
  }
}
