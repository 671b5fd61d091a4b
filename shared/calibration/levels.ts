/** The mean lightness of one ink level and how many patches it is the mean of. */
export interface LevelMean { level: number, lightness: number, count: number }

/** Levels nearer than this are the same level: far below a step of 16 bits. */
const sameLevel = 1e-6

/** Patches averaged by ink level, levels rising. The result does not depend on the patches' order, to the last bit. */
export function averageByLevel(patches: readonly { level: number, lightness: number }[]): LevelMean[] {
  const sorted = [...patches].sort((a, b) => a.level - b.level || a.lightness - b.lightness)
  const groups: { level: number, lightness: number }[][] = []
  for (const patch of sorted) {
    const group = groups.at(-1)
    if (group && patch.level - group[0]!.level < sameLevel) group.push(patch)
    else groups.push([patch])
  }
  return groups.map((group) => {
    const lightnesses = group.map(p => p.lightness).sort((a, b) => a - b)
    return { level: group[0]!.level, lightness: lightnesses.reduce((sum, l) => sum + l, 0) / group.length, count: group.length }
  })
}
