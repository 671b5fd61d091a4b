/** Decoded samples, interleaved row by row; one or three channels of colour, four of inks, one more where there is transparency. */
export interface Codes {
  width: number
  height: number
  channels: number
  codes: Uint8Array | Uint16Array
}

export const greatestOf = (codes: Codes['codes']): 255 | 65535 => codes instanceof Uint16Array ? 65535 : 255
