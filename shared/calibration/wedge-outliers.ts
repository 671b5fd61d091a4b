import { flatFieldFit } from './flat-field-fit'
import { median, medianDeviation } from './outliers'
import type { WedgePatch, WedgePrint } from './wedge-print'

/** A patch is judged against the residuals of so many nearest patches, and of twice as many of like level. */
const neighbours = 12
const dropBeyond = 4
/** Least deviation reckoned with, L*: a patch nearer than 1 L* to its neighbourhood is never dropped. */
const leastDeviation = 0.25
const passes = 3

/**
 * For each patch of each print whether it is sound. Residuals from the first fit are counted against those of the 24 patches
 * nearest in level: less their median (the first fit may cut a steep tone short), over 1.4826 of their median deviation (some
 * tones show every unevenness, others none). Spoiled is a patch whose residual so counted, less the median of the 12 nearest
 * patches', exceeds 4 × 1.4826 MAD of all such differences (at least 1 L*). Found in at most 3 passes, each without the
 * patches found before.
 */
export function soundPatches(prints: readonly WedgePrint[]): boolean[][] {
  const nearest = prints.map(print => ranked(print, (a, b) => (a.xMm - b.xMm) ** 2 + (a.yMm - b.yMm) ** 2))
  const alike = prints.map(print => ranked(print, (a, b) => Math.abs(a.level - b.level)))
  const used = prints.map(print => print.map(() => true))
  for (let pass = 0; pass < passes; pass++) {
    const { residuals } = flatFieldFit(prints.map((print, b) => print.filter((_, i) => used[b]![i])))
    const differences = prints.map((_, b) => localDifferences(countedByTone(spread(residuals[b]!, used[b]!), alike[b]!), nearest[b]!))
    const limit = dropBeyond * Math.max(1, medianDeviation(differences.flatMap(list => list.filter(d => d !== null))))
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

/** Residuals in deviations of the patches of like level, counted from their median. */
function countedByTone(residuals: readonly (number | null)[], alike: readonly number[][]): (number | null)[] {
  return residuals.map((residual, i) => {
    if (residual === null) return null
    const same = alike[i]!.map(k => residuals[k]!).filter(r => r !== null)
    return (residual - median(same)) / Math.max(leastDeviation, medianDeviation(same))
  })
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

/** For each patch the others, nearest first; twice as many as needed in place, as some may be out. */
function ranked(print: WedgePrint, distance: (a: WedgePatch, b: WedgePatch) => number): number[][] {
  return print.map((patch, i) => {
    const far = print.map(other => distance(patch, other))
    return [...print.keys()].filter(k => k !== i).sort((a, b) => far[a]! - far[b]! || a - b).slice(0, 2 * neighbours)
  })
}
