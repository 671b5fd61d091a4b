import { computed } from 'vue'
import type { MarkShape, PlotColours } from '~/utils/plot-chart'

const tokens = { ground: '--sized', lit: '--lit', text: '--graphite', quiet: '--pencil', hairline: '--rule', line: '--prussian' } as const
/** The tokens of the shapes' colours; PrintMark draws the same. */
export const markTokens: Record<MarkShape, string> = { circle: '--pencil', triangle: '--ferric-line', diamond: '--oxide', cross: '--step-6', square: '--slate', star: '--edge' }

/** The theme's colours as Chart.js takes them: a canvas knows no custom properties. Follows a change of theme. */
export function usePlotColours() {
  const { theme } = usePreferences()
  return computed<PlotColours>(() => {
    void theme.value
    const style = getComputedStyle(document.documentElement)
    const read = (names: Record<string, string>) => Object.fromEntries(Object.entries(names).map(([name, token]) => [name, style.getPropertyValue(token).trim()]))
    const named = read(tokens)
    return { ...named, band: `${named.line}3d`, wideBand: `${named.line}1f`, marks: read(markTokens) } as unknown as PlotColours
  })
}
