/** What is left of a clock, for people: `23 h 50 min`, `29 min`, `40 s`; whole minutes are rounded up, so none is shown early. */
export function sayTimeLeft(seconds: number): string {
  if (seconds < 60) return `${Math.max(0, Math.ceil(seconds))} s`
  const minutes = Math.ceil(seconds / 60)
  const hours = Math.floor(minutes / 60)
  return [hours > 0 ? `${hours} h` : '', minutes % 60 > 0 ? `${minutes % 60} min` : ''].filter(Boolean).join(' ')
}

/** How long something is meant to take: `30 min`, `a day`, `4 h`. */
export const sayDuration = (seconds: number): string => seconds === 86_400 ? 'a day' : sayTimeLeft(seconds)
