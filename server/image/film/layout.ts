import { partSides, type Rectangle } from '../sample/placement'
import type { FilmOrder } from '../protocol'

export interface FilmLayout {
  width: number
  height: number
  /** the print's own area, inside the margins */
  print: Rectangle
  /** the picture within it: smaller on two sides where it is contained */
  picture: Rectangle
}

/** A shape that misses the print's by less than this on the film is the print's shape: pixels are whole. */
const shapeTolerancePixels = 1.5

/** Where the picture lies in the print's area of `width` × `height` pixels: it fills it, or is contained and centred. */
export function placePicture(part: { width: number, height: number }, width: number, height: number) {
  const scale = Math.min(width / part.width, height / part.height)
  const fits = (side: number, room: number) => room - side < shapeTolerancePixels ? room : Math.max(1, Math.round(side))
  const inner = { width: fits(part.width * scale, width), height: fits(part.height * scale, height) }
  return { ...inner, x: Math.floor((width - inner.width) / 2), y: Math.floor((height - inner.height) / 2) }
}

/** All in film pixels, as the print reads. */
export function layOutFilm(source: { width: number, height: number, orientation: number }, order: FilmOrder): FilmLayout {
  const { widthPixels, heightPixels } = order.picture
  const margin = order.margin.pixels
  const inner = placePicture(partSides(source, order.geometry), widthPixels, heightPixels)
  return {
    width: widthPixels + 2 * margin, height: heightPixels + 2 * margin,
    print: { x: margin, y: margin, width: widthPixels, height: heightPixels },
    picture: { ...inner, x: inner.x + margin, y: inner.y + margin },
  }
}
