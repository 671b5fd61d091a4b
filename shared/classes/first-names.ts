/**
 * A first name that nobody in the class has yet: the name itself, or with the first free number, `Mika 2`.
 * Upper and lower case are the same name. Names that people type hold no digits, so that a number is always ours.
 */
export function freeFirstName(wanted: string, taken: readonly string[]): string {
  const known = new Set(taken.map(name => name.toLocaleLowerCase('en')))
  const isFree = (name: string) => !known.has(name.toLocaleLowerCase('en'))
  if (isFree(wanted)) return wanted
  for (let number = 2; ; number++) if (isFree(`${wanted} ${number}`)) return `${wanted} ${number}`
}
