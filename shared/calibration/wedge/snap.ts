import { mmFromPixels, pixelsFromMm } from '../../sheet/pixels'
import type { RectMm, WedgePage } from './page'

/**
 * The page with every edge that is inked moved to the nearest pixel boundary of a film file, so that the file needs no
 * half-inked edge pixels and a reading knows the edges exactly. Places outside the film stay.
 * Lengths move by half a pixel at most.
 */
export function snapWedgePage(page: WedgePage, pixelsPerInch: number): WedgePage {
  const snapped = (mm: number): number => mmFromPixels(pixelsFromMm(mm, pixelsPerInch), pixelsPerInch)
  const snap = ({ xMm, yMm, widthMm, heightMm }: RectMm): RectMm => {
    const [left, top] = [snapped(xMm), snapped(yMm)]
    return { xMm: left, yMm: top, widthMm: snapped(xMm + widthMm) - left, heightMm: snapped(yMm + heightMm) - top }
  }
  return {
    ...page, pixelsPerInch,
    widthMm: snapped(page.widthMm), heightMm: snapped(page.heightMm),
    field: snap(page.field), patches: page.patches.map(snap), grounds: page.grounds.map(g => ({ ...g, place: snap(g.place) })), writeIn: snap(page.writeIn),
    markers: page.markers.map(m => ({ id: m.id, place: snap(m.place), fullInk: snap(m.fullInk), clear: snap(m.clear) })),
    islands: page.islands.map(i => ({ pad: snap(i.pad), clear: snap(i.clear) })),
    identity: { ...page.identity, pad: snap(page.identity.pad), symbol: snap(page.identity.symbol) },
    rulers: page.rulers.map(r => ({ ...r, place: snap(r.place) })),
    labels: page.labels.map(l => ({ ...l, place: snap(l.place) })),
    diagnostics: { ...page.diagnostics, foil: snap(page.diagnostics.foil) },
  }
}
