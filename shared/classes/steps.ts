/** How far somebody has come in a class, first to last. */
export const classSteps = ['joined', 'photo', 'negative', 'film', 'handed-in'] as const
export type ClassStep = typeof classSteps[number]

/** What there is of a student's: counts of photos outside the bin, of negatives that were not put away, of film files that are ready, of negatives handed in. */
export interface StudentThings { photos: number, negatives: number, films: number, handedIn: number }

/**
 * The step that the things themselves show, whatever was pressed: the furthest one of which there is something.
 * Goes back when things go, as when a negative is put away.
 */
export function stepOf({ photos, negatives, films, handedIn }: StudentThings): ClassStep {
  if (handedIn > 0) return 'handed-in'
  if (films > 0 && negatives > 0) return 'film'
  if (negatives > 0) return 'negative'
  return photos > 0 ? 'photo' : 'joined'
}
