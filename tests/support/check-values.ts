import table from '../fixtures/check-values.json'

/** One entry of the table of expected values; the table names its source. */
export interface CheckValues<Input, Expected> { id: string, source: string, input: Input, expected: Expected, tolerance: number }

/** @throws when the table has no such entry, so that a test cannot pass by missing it. */
export function checkValues<Input, Expected>(id: string): CheckValues<Input, Expected> {
  const found = (table.checks as { id: string }[]).find(check => check.id === id)
  if (!found) throw new Error(`No check values named ${id}.`)
  return { tolerance: 0, ...found } as CheckValues<Input, Expected>
}

/** The greatest absolute difference of two lists of equal length. */
export function greatestDifference(a: ArrayLike<number>, b: ArrayLike<number>): number {
  if (a.length !== b.length) throw new Error(`Lists of ${a.length} and ${b.length} values.`)
  let most = 0
  for (let i = 0; i < a.length; i++) {
    const difference = Math.abs(a[i]! - b[i]!)
    if (!(difference <= most)) most = difference
  }
  return most
}
