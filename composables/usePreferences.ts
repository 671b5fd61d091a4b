export type Theme = 'light' | 'dim'
export type LengthUnit = 'mm' | 'inch'

const theme = ref<Theme>('light')
const lengthUnit = ref<LengthUnit>('mm')
/** How this browser shows things: light or dim, millimetres or inches. Kept in the browser, not in the account. */
export function usePreferences() {
  /** Once, after the first page stands: what the server rendered knows nothing of this browser. */
  function read() {
    theme.value = document.documentElement.dataset.theme === 'dim' ? 'dim' : 'light'
    lengthUnit.value = localStorage.getItem('emulside-unit') === 'inch' ? 'inch' : 'mm'
  }
  function setTheme(next: Theme) {
    theme.value = next
    document.documentElement.dataset.theme = next
    localStorage.setItem('emulside-theme', next)
  }
  function setLengthUnit(next: LengthUnit) {
    lengthUnit.value = next
    localStorage.setItem('emulside-unit', next)
  }
  return { read, theme: readonly(theme), lengthUnit: readonly(lengthUnit), setTheme, setLengthUnit }
}
