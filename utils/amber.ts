/** A colour for the dim room: its lightness (Rec. 709 weights on coded values) on a ramp from dark to amber, blue zero. */
export function amberOf(color: string): string {
  const [red, green, blue] = [1, 3, 5].map(i => Number.parseInt(color.slice(i, i + 2), 16)) as [number, number, number]
  const share = (0.2126 * red + 0.7152 * green + 0.0722 * blue) / 255
  const between = (dark: number, light: number) => Math.round(dark + (light - dark) * share)
  return `rgb(${between(18, 255)} ${between(4, 160)} 0)`
}
