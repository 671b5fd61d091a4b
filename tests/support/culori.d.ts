/** culori carries no types; this is what the tests use of it. */
declare module 'culori' {
  interface Lab { l: number, a: number, b: number }
  export function converter(mode: 'lab'): {
    (color: { mode: 'rgb', r: number, g: number, b: number }): Lab
    /** undefined for a text that names no colour */
    (color: string): Lab | undefined
  }
}
