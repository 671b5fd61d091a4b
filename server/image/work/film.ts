import { mixWeights } from '#shared/tone/mix'
import { decodePicture } from '../decode/decode'
import { composeFilm, filmInk } from '../film/compose'
import { layOutFilm } from '../film/layout'
import { layOutMarks } from '../film/marks'
import { writeFilm } from '../film/write-film'
import { lightPlane, type LightPlane } from '../light-plane'
import type { FilmOrder, ImageCalls, PictureSource } from '../protocol'
import { placePixels } from '../sample/placement'
import { toneRows } from '../sample/tone-rows'

/** Share of a film's time that passes before its first row, for progress: decoding. */
const decodingShare = 0.25

/** Decodes and keeps only what the film needs. */
async function openSource(source: PictureSource, order: FilmOrder): Promise<{ plane: LightPlane, orientation: number }> {
  const picture = await decodePicture(source)
  return { plane: lightPlane(picture, mixWeights(order.tone.adjustments.mix)), orientation: picture.header.orientation }
}

export async function makeFilm({ path, working, target, order, renderKey }: ImageCalls['film']['in'], onProgress: (fraction: number) => void): Promise<ImageCalls['film']['out']> {
  const ink = filmInk(order)
  const { plane, orientation } = await openSource({ path, working }, order)
  onProgress(decodingShare)
  const source = { width: plane.width, height: plane.height, orientation }
  const layout = layOutFilm(source, order)
  const marks = await layOutMarks(order, layout)
  const tones = toneRows(plane, placePixels(source, order.geometry, layout.picture.width, layout.picture.height))
  const rows = composeFilm(tones, ink, layout, marks, order)
  const spec = {
    width: layout.width, height: layout.height, channels: ink.channels, pixelsPerInch: order.pixelsPerInch,
    pageMm: order.filmMm, title: order.marks.labelText || 'Film', renderKey,
  }
  return await writeFilm(target, order.format, rows, spec, done => onProgress(decodingShare + (1 - decodingShare) * done / layout.height))
}
