import { computed } from 'vue'
import type { PlotColours } from '~/utils/plot-chart'

const tokens = { ground: '--sized', lit: '--lit', text: '--graphite', quiet: '--pencil', hairline: '--rule', line: '--prussian', mark: '--ferric' } as const

/** The theme's colours as Chart.js takes them: a canvas knows no custom properties. Follows a change of theme. */
export function usePlotColours() {
  const { theme } = usePreferences()
  return computed<PlotColours>(() => {
    void theme.value
    const style = getComputedStyle(document.documentElement)
    const named = Object.fromEntries(Object.entries(tokens).map(([name, token]) => [name, style.getPropertyValue(token).trim()]))
    return { ...named, band: `${named.line}3d` } as PlotColours
  })
}
