/** A patch of a wedge print: its ink level, lightness, and its cell's centre, −1 … 1 across the cells and in mm from the middle. */
export interface WedgePatch { level: number, lightness: number, x: number, y: number, xMm: number, yMm: number }

/** The sound patches of one print of a wedge. */
export type WedgePrint = readonly WedgePatch[]

/** Patches in an order of their own, so that a fit does not depend on the order they came in. */
export const inPlaceOrder = (print: WedgePrint): WedgePrint =>
  [...print].sort((a, b) => a.yMm - b.yMm || a.xMm - b.xMm || a.level - b.level || a.lightness - b.lightness)
