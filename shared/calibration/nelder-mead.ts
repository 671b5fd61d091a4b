/** A vertex and the function's value there. */
interface Vertex { at: number[], value: number }

/**
 * Least value of a function by Nelder and Mead's simplex, Computer Journal 7(4):308–313, 1965 (reflection 1, expansion 2,
 * contraction ½, shrinking ½). The first simplex is `start` and, for each direction, `start` moved along it by its step.
 * Stops after `evaluations` (counting the first simplex), or when all vertices lie within 0.1 of the best, in place and value.
 */
export function minimise(value: (at: readonly number[]) => number, start: readonly number[], steps: readonly number[], evaluations: number): number[] {
  let used = 0
  const vertex = (at: number[]): Vertex => ({ at, value: (used++, value(at)) })
  const simplex = [vertex([...start]), ...steps.map((step, i) => vertex(start.map((v, k) => k === i ? v + step : v)))]
  while (used < evaluations) {
    simplex.sort((a, b) => a.value - b.value)
    if (isSettled(simplex)) break
    step(simplex, vertex, () => used < evaluations)
  }
  return simplex.sort((a, b) => a.value - b.value)[0]!.at
}

const tolerance = 0.1
function isSettled(simplex: readonly Vertex[]): boolean {
  const best = simplex[0]!
  return simplex.every(v => Math.abs(v.value - best.value) <= tolerance && v.at.every((x, k) => Math.abs(x - best.at[k]!) <= tolerance))
}

/** One move of a sorted simplex. */
function step(simplex: Vertex[], vertex: (at: number[]) => Vertex, mayEvaluate: () => boolean): void {
  const last = simplex.length - 1
  const worst = simplex[last]!
  const centre = worst.at.map((_, k) => simplex.slice(0, last).reduce((sum, v) => sum + v.at[k]!, 0) / last)
  const along = (share: number): Vertex => vertex(centre.map((c, k) => c + share * (worst.at[k]! - c)))
  const reflected = along(-1)
  if (reflected.value < simplex[0]!.value) {
    const expanded = mayEvaluate() ? along(-2) : reflected
    simplex[last] = expanded.value < reflected.value ? expanded : reflected
  }
  else if (reflected.value < simplex[last - 1]!.value) {
    simplex[last] = reflected
  }
  else if (mayEvaluate()) {
    const outside = reflected.value < worst.value
    const contracted = along(outside ? -0.5 : 0.5)
    if (outside ? contracted.value <= reflected.value : contracted.value < worst.value) simplex[last] = contracted
    else shrink(simplex, vertex, mayEvaluate)
  }
}

function shrink(simplex: Vertex[], vertex: (at: number[]) => Vertex, mayEvaluate: () => boolean): void {
  const best = simplex[0]!.at
  for (let i = 1; i < simplex.length && mayEvaluate(); i++) simplex[i] = vertex(simplex[i]!.at.map((x, k) => best[k]! + (x - best[k]!) / 2))
}
