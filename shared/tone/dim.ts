/** The dim room's amber, from its ground to its brightest; sRGB, blue 0 throughout. Spaced so that lightness steps evenly. */
const amber: readonly (readonly [number, number])[] = [[0x12, 0x04], [0x70, 0x2C], [0xD8, 0x64], [0xFF, 0xA0]]

/** The amber that stands for a lightness L* 0 … 100 in the dim theme; blue is 0. */
export function dimColour(lightness: number): readonly [number, number, 0] {
  const place = lightness / 100 * (amber.length - 1)
  const below = Math.min(amber.length - 2, Math.floor(place))
  const share = place - below
  const channel = (i: 0 | 1): number => Math.round(amber[below]![i] + share * (amber[below + 1]![i] - amber[below]![i]))
  return [channel(0), channel(1), 0]
}
