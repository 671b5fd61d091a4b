import { flatFieldFit } from './flat-field-fit'
import { median, medianDeviation } from './outliers'
import { toneWeights } from './tone-weights'
import type { WedgePrint } from './wedge-print'

/** A patch is judged against the residuals of so many nearest patches. */
const neighbours = 12
const dropBeyond = 4
/** Least deviation reckoned with, L*: a patch nearer than 1 L* to its neighbourhood is never dropped. */
const leastDeviation = 0.25
const passes = 3

/**
 * For each patch of each print whether it is sound. Residuals from the first fit are counted against how much unevenness
 * shows at the patch's tone (else the tones that show most look spoiled); spoiled is a patch whose residual, less the median
 * of the 12 nearest patches', exceeds 4 × 1.4826 MAD of all such differences (at least 1 L*). Found in at most 3 passes, each
 * without the patches found before.
 */
export function soundPatches(prints: readonly WedgePrint[]): boolean[][] {
  const nearest = prints.map(nearestPatches)
  const used = prints.map(print => print.map(() => true))
  for (let pass = 0; pass < passes; pass++) {
    const { response, residuals } = flatFieldFit(prints.map((print, b) => print.filter((_, i) => used[b]![i])))
    const differences = prints.map((print, b) => {
      const scale = unevenness(response, print)
      return localDifferences(spread(residuals[b]!, used[b]!).map((r, i) => r === null ? null : r / scale[i]!), nearest[b]!)
    })
    const known = differences.flatMap(list => list.filter(d => d !== null))
    const limit = dropBeyond * Math.max(leastDeviation, medianDeviation(known))
    let found = 0
    differences.forEach((list, b) => list.forEach((difference, i) => {
      if (difference === null || Math.abs(difference) <= limit) return
      used[b]![i] = false
      found++
    }))
    if (found === 0) break
  }
  return used
}

/** How much of an unevenness shows at each patch, at most 1: no less than 0.3, as every patch has its own noise. */
function unevenness(response: Float64Array, print: WedgePrint): Float64Array {
  const { coating, exposure } = toneWeights(response, print.map(p => p.level))
  return coating.map((w, i) => Math.max(0.3, w, exposure[i]!))
}

/** Residuals at their patches' places, null where a patch is out. */
function spread(residuals: Float64Array, used: readonly boolean[]): (number | null)[] {
  let next = 0
  return used.map(isUsed => isUsed ? residuals[next++]! : null)
}

function localDifferences(residuals: readonly (number | null)[], nearest: readonly number[][]): (number | null)[] {
  return residuals.map((residual, i) => {
    if (residual === null) return null
    const around = nearest[i]!.map(k => residuals[k]!).filter(r => r !== null).slice(0, neighbours)
    return around.length === 0 ? residual : residual - median(around)
  })
}

/** For each patch the others, nearest first; twice as many as needed, as some may be out. */
function nearestPatches(print: WedgePrint): number[][] {
  return print.map((patch, i) => {
    const distance = (k: number): number => (print[k]!.xMm - patch.xMm) ** 2 + (print[k]!.yMm - patch.yMm) ** 2
    return [...print.keys()].filter(k => k !== i).sort((a, b) => distance(a) - distance(b) || a - b).slice(0, 2 * neighbours)
  })
}
