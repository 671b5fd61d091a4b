import type { Process } from '../schemas/benches'

/** A colour on a path: CIELAB, D50. */
export type LabPoint = readonly [lightness: number, a: number, b: number]

/** Pictures are shown as prints of a process, or as one of these. */
export const otherLooks = ['photo', 'film', 'unexposed'] as const
export type Look = Process | typeof otherLooks[number]

/**
 * Where each look's colour passes, from black to white; a smooth line is drawn through it. All values are an *assumed look*:
 * chosen by eye for typical prints, not measured. A bench's own patches tell better once they are read.
 */
export const lookPaths: Record<Look, readonly LabPoint[]> = {
  // Prussian blue: strongest in the middle, reddish in the shadows
  'cyanotype': [[0, 0, 0], [22, 3, -26], [44, -4, -36], [65, -9, -29], [82, -6, -14], [94, -0.5, 4], [100, 0, 2]],
  // colloidal silver and iron: warm brown, yellowish where thin
  'van-dyke': [[0, 0, 0], [18, 7, 8], [40, 10, 18], [62, 9, 22], [80, 6, 18], [94, 1, 7], [100, 0, 3]],
  // printing-out silver: red-brown, towards violet in the shadows
  'salt': [[0, 0, 0], [22, 10, 6], [42, 14, 14], [62, 11, 16], [80, 6, 12], [94, 1, 6], [100, 0, 3]],
  // developed silver on iron: neutral brown-black
  'kallitype': [[0, 0, 0], [15, 3, 4], [40, 5, 10], [62, 5, 12], [80, 3.5, 10], [94, 0.5, 6], [100, 0, 3]],
  // metal black: neutral, a little warm
  'platinum-palladium': [[0, 0, 0], [17, 1.5, 2.5], [40, 2.5, 6], [62, 2.5, 8], [80, 2, 7.5], [94, 0.5, 6], [100, 0, 3]],
  // one layer of a dark pigment: here lamp black
  'gum': [[0, 0, 0], [25, 0.5, 1], [45, 0.5, 2], [65, 0.5, 3.5], [80, 0.5, 5], [94, 0.5, 6], [100, 0, 3]],
  // pigment in gelatine: deep, warm black
  'carbon': [[0, 0, 0], [10, 2, 2], [40, 3, 6], [62, 2.5, 7], [80, 2, 7], [94, 0.5, 5], [100, 0, 2]],
  'other': [[0, 0, 0], [20, 0, 0.5], [50, 0, 2], [75, 0, 3.5], [94, 0, 5], [100, 0, 2]],
  'photo': [[0, 0, 0], [100, 0, 0]],
  // pigment ink on clear film, on a light table
  'film': [[0, 0, 0], [10, 0, -2.5], [50, -0.5, -1], [90, -0.6, 1], [95, -0.6, 1.5], [100, 0, 0]],
  // ferric sensitizer before the light has reached it: yellow-green
  'unexposed': [[0, 0, 0], [45, -2, 36], [65, -5, 46], [85, -6, 38], [95, -2, 18], [100, 0, 4]],
}
