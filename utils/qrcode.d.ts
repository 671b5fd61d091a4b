/** qrcode carries no types; this is what is used of it. */
declare module 'qrcode' {
  /** ISO/IEC 18004; `data` holds 1 for dark, row by row, without the quiet zone */
  export function create(text: string | { data: string, mode: string }[], options?: { version?: number, errorCorrectionLevel?: 'L' | 'M' | 'Q' | 'H' }): { modules: { size: number, data: Uint8Array } }
}
