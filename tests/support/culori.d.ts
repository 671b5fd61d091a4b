/** culori carries no types; this is what the tests use of it. */
declare module 'culori' {
  export function converter(mode: 'lab'): (color: string | object) => { l: number, a: number, b: number } | undefined
}
