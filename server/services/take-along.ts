import { setTimeout as sleep } from 'node:timers/promises'
import { and, asc, eq, isNull } from 'drizzle-orm'
import { filmFormats, type FilmFormat } from '#shared/schemas/negatives'
import { pictureEndings } from '#shared/schemas/picture-formats'
import { db } from '../db/client'
import { negatives, photos } from '../db/schema'
import { storageKeys } from '../storage'
import type { StudioAccess } from './access'
import { curveTable } from './curve-table'
import { fileNameFrom } from './file-names'
import { ownedBy, readParts, type NegativeParts } from './negative-parts'
import { filmRequest, negativeOf } from './negatives'
import type { PhotoRow } from './photos'
import { printCard } from './print-card'
import { filmOrState, rendersByKey } from './renders'
import { storage } from './storage'

/** Everything of one person's own in a studio, as files of an archive. */

export interface ArchiveFile { name: string, input: string | AsyncIterable<Uint8Array>, size?: number, lastModified: Date }

/** All films of one archive together; what is not ready by then is named in the archive instead. */
const filmsWaitSeconds = 240
const filmFormatWhenNone: FilmFormat = 'pdf'

/** Photos first: while they go out, films that were never made are made. */
export async function* thingsOf(studio: StudioAccess, requestId?: string): AsyncGenerator<ArchiveFile> {
  const own = await db().select().from(photos).where(and(eq(photos.studioId, studio.id), eq(photos.uploaderId, studio.personId), isNull(photos.binnedAt))).orderBy(asc(photos.id))
  const works = await readParts(and(ownedBy(studio), isNull(negatives.archivedAt)), asc(negatives.id), 10_000)
  const films = new Map<NegativeParts, FilmFormat[]>()
  for (const parts of works) films.set(parts, await formatsOf(parts, requestId))
  const photoNames = uniqueNames(own, photo => fileNameFrom(photo.name, pictureEndings[photo.format][0]))
  const folders = uniqueNames(works, ({ negative }) => fileNameFrom(negative.name, '').slice(0, -1))

  yield textFile('Read me.txt', readMe(studio, own.length, works.length), new Date())
  for (const photo of own) yield await storedFile(`photos/${photoNames.get(photo)!}`, storageKeys.original(photo.studioId, photo.id), photo.createdAt)
  const deadline = Date.now() + 1000 * filmsWaitSeconds
  for (const parts of works) yield* negativeFiles(studio, parts, `negatives/${folders.get(parts)!}`, photoName(own, photoNames, parts), films.get(parts)!, deadline)
}

/** The formats in which its film is ready; where there is none, one is asked for. */
async function formatsOf(parts: NegativeParts, requestId?: string): Promise<FilmFormat[]> {
  const keys = filmFormats.map(format => filmRequest(parts, format).key)
  const rows = await rendersByKey(parts.negative.studioId, keys)
  const ready = filmFormats.filter((_, i) => rows.get(keys[i]!)?.state === 'ready')
  if (ready.length > 0) return ready
  await filmOrState(filmRequest(parts, filmFormatWhenNone, requestId)).catch(() => {}) // why it failed is said in its place
  return [filmFormatWhenNone]
}

async function* negativeFiles(studio: StudioAccess, parts: NegativeParts, folder: string, photo: string | undefined, formats: FilmFormat[], deadline: number): AsyncGenerator<ArchiveFile> {
  const { negative, bench, curve } = parts
  const { renders: _, warnings: __, ...settings } = await negativeOf(studio, negative.id)
  const at = negative.createdAt
  yield textFile(`${folder}/settings.json`, `${JSON.stringify({ ...settings, bench: bench.name, photo: photo ?? null }, null, 2)}\n`, at)
  yield textFile(`${folder}/curve.csv`, (await curveTable(studio, curve.id, 'csv')).text, at)
  const { title, lines } = await printCard(parts, formats[0]!)
  yield textFile(`${folder}/print card.txt`, `${title}\n\n${lines.map(line => `${line.label}: ${line.text}`).join('\n')}\n`, at)
  for (const format of formats) yield await filmFile(parts, `${folder}/film.${format}`, format, deadline)
}

async function filmFile(parts: NegativeParts, name: string, format: FilmFormat, deadline: number): Promise<ArchiveFile> {
  try {
    for (;;) {
      const made = await filmOrState(filmRequest(parts, format))
      if ('file' in made) return await storedFile(name, made.file.key, parts.negative.createdAt)
      if (Date.now() > deadline) throw new Error('It took longer than this archive could wait. Ask for the archive again in some minutes.')
      await sleep(500)
    }
  }
  catch (error) {
    return textFile(`${name} is missing.txt`, `This film could not be added. ${(error as Error).message}\n`, new Date())
  }
}

const textFile = (name: string, text: string, lastModified: Date): ArchiveFile => ({ name, input: text, lastModified })

async function storedFile(name: string, key: string, lastModified: Date): Promise<ArchiveFile> {
  const held = await storage().stat(key)
  if (!held) return textFile(`${name} is missing.txt`, 'This file was not found where it is kept. Tell the studio’s owner.\n', lastModified)
  return { name, input: await storage().read(key), size: held.bytes, lastModified }
}

const photoName = (own: PhotoRow[], names: Map<PhotoRow, string>, { photo }: NegativeParts): string | undefined => {
  const row = own.find(one => one.id === photo.id)
  return row && `photos/${names.get(row)!}`
}

/** Equal names are told apart by number, whatever a file system thinks of upper and lower case. */
function uniqueNames<T>(items: T[], nameOf: (item: T) => string): Map<T, string> {
  const taken = new Set<string>()
  const names = new Map<T, string>()
  for (const item of items) {
    const [, stem, ending] = /^(.*?)(\.[^.]*)?$/.exec(nameOf(item))!
    let name = `${stem}${ending ?? ''}`
    for (let number = 2; taken.has(name.toLowerCase()); number++) name = `${stem} ${number}${ending ?? ''}`
    taken.add(name.toLowerCase())
    names.set(item, name)
  }
  return names
}

const readMe = (studio: StudioAccess, photoCount: number, negativeCount: number) => `From ${studio.name}, by Emulside.

photos/     ${photoCount} as you sent them, byte for byte
negatives/  ${negativeCount}, each in a folder of its own:
  settings.json    what it was made with, lengths in mm
  curve.csv        its curve: ink level for each tone
  print card.txt   what to check before the film is printed
  film.…           the film at true size: print it at 100 %, without fitting

Photos and negatives that you put away are not in it.
`
