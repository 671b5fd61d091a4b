import { createHash } from 'node:crypto'
import { copyFile, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { z } from 'zod'
import type { FilmFormat, negativeBody } from '#shared/schemas/negatives'
import { negativeBody as bodySchema } from '#shared/schemas/negatives'
import type { StudioAccess } from '../../services/access'
import { requireParts } from '../../services/negative-parts'
import { archiveNegative, createNegative, filmRequest } from '../../services/negatives'
import { arrivalLabel, newPhotoId, takePhotos } from '../../services/photo-intake'
import { binPhoto } from '../../services/photos'
import { requestRender } from '../../services/renders'
import { storage } from '../../services/storage'
import type { DemoBenches } from './benches'
import type { DemoPeople } from './people'

/** Rendered by tests/support/demo/make-photographs.mjs. */
export type Picture = 'bottles' | 'brick-light' | 'pears' | 'river-fog' | 'rope-coil' | 'rope-walk'
const fileNames: Record<Picture, string> = {
  'bottles': 'Bottles on the sill.jpg', 'brick-light': 'Evening wall.jpg', 'pears': 'Three pears.jpg',
  'river-fog': 'River in November.jpg', 'rope-coil': 'Last coil.jpg', 'rope-walk': 'The long hall.jpg',
}

/** Takes one of the demo's photographs in, as if this person had sent it. */
export async function sendPhoto(studio: StudioAccess, picture: Picture): Promise<string> {
  const source = join(process.env.DEMO_PHOTOS!, `${picture}.jpg`)
  const bytes = await readFile(source)
  const id = newPhotoId()
  const file = await storage().temporary(arrivalLabel(studio.id, id))
  try {
    await copyFile(source, file.path)
    const arrival = { id, fileName: fileNames[picture], bytes: bytes.length, sha256: createHash('sha256').update(bytes).digest('hex'), file }
    return (await takePhotos(studio, [arrival])).items[0]!.id
  }
  finally {
    await file.discard()
  }
}

type Settings = Omit<z.input<typeof negativeBody>, 'photoId'>
export const makeNegative = async (studio: StudioAccess, photoId: string, settings: Settings): Promise<string> =>
  (await createNegative(studio, bodySchema.parse({ photoId, ...settings }))).item.id

/** The worker makes them once it runs. */
export async function orderFilms(studio: StudioAccess, negativeId: string, formats: FilmFormat[]): Promise<void> {
  const parts = await requireParts(studio, negativeId)
  for (const format of formats) await requestRender(filmRequest(parts, format))
}

/** Made with the curve that is in use now, so that a newer one is offered later. */
export async function makeNegativesThatWait({ owner }: DemoPeople, benchId: string): Promise<void> {
  await makeNegative(owner, await sendPhoto(owner, 'rope-walk'), {
    benchId, size: { widthMm: 144, heightMm: 180 }, adjustments: { midtone: -0.1, contrast: 0.3 }, margin: { mm: 10, kind: 'clear' }, marks: { ruler: true, label: true },
  })
}

export async function makeNegatives({ owner, technician, member }: DemoPeople, benches: DemoBenches): Promise<void> {
  const benchId = benches.cyanotype
  await Promise.all([
    (async () => {
      const river = await makeNegative(owner, await sendPhoto(owner, 'river-fog'), { benchId, size: { widthMm: 210, heightMm: 140 }, adjustments: { blackPoint: 0.02, whitePoint: 0.86, contrast: 0.25 } })
      await orderFilms(owner, river, ['tiff', 'pdf'])
      await sendPhoto(owner, 'brick-light')
      await binPhoto(owner, await sendPhoto(owner, 'pears'))
    })(),
    (async () => {
      const coil = await sendPhoto(technician, 'rope-coil')
      const printed = await makeNegative(technician, coil, { benchId, size: { widthMm: 160, heightMm: 120 }, margin: { mm: 12, kind: 'opaque' }, marks: { ruler: true, label: true }, adjustments: { midtone: -0.08, contrast: 0.15 } })
      await orderFilms(technician, printed, ['tiff'])
      await archiveNegative(technician, await makeNegative(technician, coil, { benchId, name: 'Last coil, first try', size: { widthMm: 120, heightMm: 90 } }))
    })(),
    (async () => {
      const pears = await sendPhoto(member, 'pears'), bottles = await sendPhoto(member, 'bottles')
      // Cropped to a square about the two pears that stand.
      await makeNegative(member, pears, { benchId, size: { widthMm: 100, heightMm: 100 }, crop: { x: 0, y: 0.02, width: 0.64, height: 0.8 }, adjustments: { mix: { red: 0.6, green: 1.2, blue: 0.8 } } })
      await makeNegative(member, bottles, { process: 'salt', size: { widthMm: 160, heightMm: 128 } })
    })(),
  ])
}
