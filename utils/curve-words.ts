import type { ReadingChannel } from '#shared/schemas/benches'
import type { Curve } from '#shared/schemas/curves'
import { formatDecimal, formatFixed, formatWhen } from './figures'

/** What figures called L* mean on a bench that is not read in lightness. */
export const channelSays: Record<ReadingChannel, string> = {
  'lightness': '',
  'density-blue': 'This bench is read through blue: L* here is the lightness behind that filter.',
  'density-green': 'This bench is read through green: L* here is the lightness behind that filter.',
  'density-red': 'This bench is read through red: L* here is the lightness behind that filter.',
  'colour-path': 'This bench is read along its own colours: figures called L* are per cent of the way from its deepest tone to paper.',
}

/** Whole L* from 10, tenths from 1, hundredths below: an error is not known better. */
export const errorFigure = (value: number): string => formatDecimal(value, value >= 10 ? 0 : value >= 1 ? 1 : 2)

const countWords = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine']
/** `one wedge print`, `12 readings`. */
export const counted = (count: number, one: string, many = `${one}s`): string => `${countWords[count] ?? count} ${count === 1 ? one : many}`

/** What the fit stands on: prints pooled, patches used and left out, scatter within a print and between prints. */
export function basisText({ basis, readingIds }: Pick<Curve, 'basis' | 'readingIds'>): string {
  if (!basis) return `From ${counted(readingIds.length, 'reading')}.`
  const { prints, patchesUsed, patchesDropped, noise, printSpread } = basis
  const dropped = patchesDropped ? `; ${counted(patchesDropped, 'patch', 'patches')} lay too far from ${patchesDropped === 1 ? 'its' : 'their'} like and ${patchesDropped === 1 ? 'was' : 'were'} left out` : ''
  const scatter = [
    noise === null ? '' : `a single patch scatters by ${formatFixed(noise, 1)} L*`,
    printSpread === null ? '' : `print differs from print by ${formatFixed(printSpread, 1)} L*`,
  ].filter(Boolean).join(', ')
  return `From ${counted(prints, 'wedge print')}, ${patchesUsed} patches${dropped}.${scatter ? ` ${scatter[0]!.toUpperCase()}${scatter.slice(1)}.` : ''}`
}

/** What one more wedge print would buy: the sentence, or null where the fit does not tell. */
export function oneMoreText({ nextPrint, nextPrintWithOneMore: more }: NonNullable<Curve['expectedError']>): string | null {
  if (!more) return null
  if (more.p95 > 0.95 * nextPrint.p95) return 'One more wedge print would hardly change this: prints differ that much from one another, whatever the curve.'
  return `One more wedge print would bring this to about ± ${errorFigure(more.p95)} L*.`
}

/** `draft of 2 June, by Ines Marlow`. */
export function curveStory({ state, createdAt, inUseSince, createdBy }: Pick<Curve, 'state' | 'createdAt' | 'inUseSince' | 'createdBy'>): string {
  const by = createdBy ? `, fitted by ${createdBy}` : ''
  if (state === 'in-use' && inUseSince) return `in use since ${formatWhen(inUseSince)}${by}`
  return `${state === 'draft' ? 'draft' : 'retired; fitted'} ${formatWhen(createdAt)}${state === 'draft' || !createdBy ? by : ` by ${createdBy}`}`
}

/** The shadows turn lighter again with less ink: what to ask before anything else. */
export function reversalText({ level, rise }: NonNullable<NonNullable<Curve['basis']>['reversal']>): string {
  return `Below ${formatDecimal(level * 100, 1)} % ink the print turns lighter again, by ${formatFixed(rise, 1)} L*.`
}
