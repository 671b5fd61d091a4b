import { classSteps, type ClassStep } from '#shared/classes/steps'

/** What a step is called on the board: what there is of the student's by now. */
export const classStepNames: Record<ClassStep, string> = { 'joined': 'Joined', 'photo': 'Photo', 'negative': 'Negative', 'film': 'Film', 'handed-in': 'Handed in' }
export { classSteps }

/** Steps behind and reached, of five. */
export const stepsTaken = (step: ClassStep): number => classSteps.indexOf(step) + 1

/** The end of a day as it is here, from `2026-06-30`; null for what is no day. */
export function endOfDay(date: string): string | null {
  const end = new Date(`${date}T23:59:59`)
  return Number.isNaN(end.getTime()) ? null : end.toISOString()
}

/** The day of an instant as it is here, as a date field takes it. */
export function dateOf(instant: string | Date): string {
  const at = new Date(instant)
  return [at.getFullYear(), at.getMonth() + 1, at.getDate()].map(part => String(part).padStart(2, '0')).join('-')
}
