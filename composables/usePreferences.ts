export type Theme = 'light' | 'dim'
export type LengthUnit = 'mm' | 'inch'

const theme = ref<Theme>('light')
const lengthUnit = ref<LengthUnit>('mm')
let isRead = false

/** How this browser shows things: light or dim, millimetres or inches. Kept in the browser, not in the account. */
export function usePreferences() {
  if (import.meta.client && !isRead) {
    isRead = true
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
  return { theme: readonly(theme), lengthUnit: readonly(lengthUnit), setTheme, setLengthUnit }
}
