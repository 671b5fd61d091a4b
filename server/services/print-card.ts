import { desc, and, eq } from 'drizzle-orm'
import type { FilmFormat } from '#shared/schemas/negatives'
import { formatSize } from '#shared/sheet/sizes'
import { db } from '../db/client'
import { baseExposures } from '../db/schema'
import { filmSize } from './film-order'
import type { NegativeParts } from './negative-parts'
import { negativeWarnings } from './negative-warnings'

/** Minutes a film dries before it touches paper, where its own time is not known; ten is the least: common practice, no source. */
const usualDryingMinutes = 30
const leastDryingMinutes = 10

export interface PrintCard { title: string, lines: { label: string, text: string }[] }

/** What to check and set before this film is printed, in the order in which it is done. */
export async function printCard(parts: NegativeParts, format: FilmFormat): Promise<PrintCard> {
  const { negative, bench } = parts
  return {
    title: `${negative.name}, for ${bench.name}`,
    lines: [
      ...negativeWarnings(parts, [format]).map(({ code, message }) => ({ label: code === 'uncalibrated' ? 'Uncalibrated' : 'Mind', text: message })),
      { label: 'Nozzle check', text: 'Print one first. A missing line in it is a stripe in the print.' },
      { label: 'Film side', text: filmSide(bench.path.filmSide ?? parts.film?.facts.coatedSide) },
      { label: 'Scale', text: 'Actual size, 100 %. No fitting, no shrinking to a printable area.' },
      { label: 'Colour adjustment', text: 'Off. The numbers in the file are ink levels; nothing may change them.' },
      ...inkjetSettings(parts),
      { label: 'Printed size', text: printedSize(parts) },
      { label: 'Drying', text: drying(parts.film?.facts.dryingMinutes) },
      { label: 'On the paper', text: negative.settings.mirror ? 'Printed side down on the coated side: through the film’s back the picture reads right.' : 'This film is not mirrored: it lies with its printed side up, or the process turns the picture over by itself.' },
      { label: 'Base exposure', text: await baseExposure(parts) },
    ],
  }
}

const drying = (learned?: number): string => learned === undefined
  ? `${usualDryingMinutes} minutes before the film touches paper. ${leastDryingMinutes} are the least, by common practice.`
  : `${learned} minutes before the film touches paper, as learned of this film.${learned < leastDryingMinutes ? ` ${leastDryingMinutes} are the least, by common practice.` : ''}`

const sentence = (text: string): string => `${text[0]!.toUpperCase()}${text.slice(1).replace(/\.$/, '')}.`

const filmSide = (known?: string): string =>
  `${known ? `${sentence(known)} ` : ''}Ink goes on the coated side: it is the duller one, and a moistened fingertip sticks to it at a corner.`

function inkjetSettings({ bench: { path } }: NegativeParts) {
  const settings = [
    ['Media type', path.mediaType], ['Quality', path.quality], ['Sent by', path.sentBy],
  ] as const
  return settings.map(([label, value]) => ({ label, text: value ?? `As for the bench’s wedge; it is not written down yet.` })).filter((_, i) => i < 2 || path.sentBy !== undefined)
}

function printedSize({ negative: { settings } }: NegativeParts): string {
  const film = filmSize(settings)
  const whole = settings.margin.mm > 0 ? `, ${formatSize(film)} with its margins` : ''
  return `The picture measures ${formatSize(settings.size)}${whole}. Lay a ruler on it, both ways.`
}

/** In the unit that it was found in: seconds, or light units where an integrator or the sun is used. */
async function baseExposure({ bench }: NegativeParts): Promise<string> {
  const [newest] = await db().select().from(baseExposures)
    .where(and(eq(baseExposures.studioId, bench.studioId), eq(baseExposures.benchId, bench.id))).orderBy(desc(baseExposures.id)).limit(1)
  if (!newest) return 'Not found yet for this bench: print an exposure strip first.'
  const value = new Intl.NumberFormat('en', { maximumFractionDigits: 1 }).format(newest.value)
  return newest.unit === 's' ? `${value} s` : `${value} light units`
}
