import type { IconName } from '~/components/ui/icon-paths'

/** The studio's places, in the order of the work. A place stands here once its screen exists. */
export const places: { name: string, screen: string, icon: IconName, holds: string[] }[] = [
  { name: 'Start', screen: '', icon: 'film', holds: [] },
  { name: 'Photos', screen: 'photos', icon: 'photo', holds: ['negatives'] },
  { name: 'Benches', screen: 'benches', icon: 'bench', holds: [] },
  { name: 'Shelf', screen: 'shelf', icon: 'shelf', holds: [] },
]

/** Whether an address lies in a place; a negative belongs to its photo's. */
export function isInPlace(place: typeof places[number], path: string): boolean {
  const screen = path.split('/')[3] ?? ''
  return screen === place.screen || place.holds.includes(screen)
}
