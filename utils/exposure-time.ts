import { parseDecimal } from './figures'

/** Seconds from `260`, `4:20`, `4 min 20 s`, `4,5 min` or `1 h 10 min`; null when it is none of these or not above 0. */
export function readSeconds(text: string): number | null {
  const trimmed = text.trim().toLowerCase()
  const clock = /^(\d+):([0-5]?\d(?:[.,]\d+)?)$/.exec(trimmed)
  if (clock) return positive(Number(clock[1]) * 60 + parseDecimal(clock[2]!)!)
  const named = /^(?:([\d.,]+)\s*h(?:ours?)?)?\s*(?:([\d.,]+)\s*m(?:in(?:utes?)?)?)?\s*(?:([\d.,]+)\s*(?:s(?:ec(?:onds?)?)?)?)?$/.exec(trimmed)
  if (!named || trimmed === '') return null
  const parts = named.slice(1).map(part => part === undefined ? 0 : parseDecimal(part))
  if (parts.some(part => part === null)) return null
  return positive(parts[0]! * 3600 + parts[1]! * 60 + parts[2]!)
}

const positive = (seconds: number) => seconds > 0 ? seconds : null

export interface TimePart { figure: string, unit: string }

/** `4 min 20 s` in figures and units, so that units can be set smaller. Whole seconds from 10 s, tenths below. */
export function timeParts(seconds: number): TimePart[] {
  if (seconds < 10) return [{ figure: String(Math.round(seconds * 10) / 10), unit: 's' }]
  const whole = Math.round(seconds)
  const parts = [
    { figure: Math.floor(whole / 3600), unit: 'h' },
    { figure: Math.floor(whole % 3600 / 60), unit: 'min' },
    { figure: whole % 60, unit: 's' },
  ]
  return parts.filter(part => part.figure > 0).map(part => ({ figure: String(part.figure), unit: part.unit }))
}

/** Seconds as people say them at the lamp: 260 → `4 min 20 s`. */
export const formatExposure = (seconds: number) => timeParts(seconds).map(part => `${part.figure} ${part.unit}`).join(' ')
