import type { ShelfFacts, ShelfKind } from '#shared/schemas/shelf'
import type { StudioAccess } from '../../services/access'
import { createShelfItem } from '../../services/shelf'

// Invented things with invented figures; no maker's name. The figures are such as papers, films and lamps of their kind
// have: common practice, no source.

const paths: ShelfFacts['inkjets']['paths'] = [
  { name: 'Film, adjustment off', fileKind: 'tiff', bitDepth: 16, sentBy: 'The lab computer’s print program', pixelsPerInch: 360, mediaType: 'Backlit film', quality: 'Finest, one direction', colourAdjustment: 'off', filmSide: 'The milky, slightly sticky side' },
  { name: 'PDF from a phone', fileKind: 'pdf', sentBy: 'The house network', pixelsPerInch: 300, mediaType: 'Matt paper', quality: 'Fine', colourAdjustment: 'unknown' },
]

/** Puts everything on the shelf and gives the ids that benches stand on. */
export async function fillShelf(studio: StudioAccess) {
  const put = async <K extends ShelfKind>(kind: K, name: string, facts: ShelfFacts[K], notes = '') => (await createShelfItem(studio, kind, { name, facts, notes })).item.id
  return {
    riverPaper: await put('papers', 'River cotton, 300 g', {
      maker: 'The paper mill upstream', weightGramsPerM2: 300, surface: 'hot-pressed', fibre: 'Cotton', sizing: 'Gelatine, surface', alkalineReserve: 'no', coatedSide: 'Smooth side, the watermark reads right', coatingMillilitresPerM2: 38,
      white: { lightness: 95.6, a: 0.1, b: 2.4 }, sizes: [{ widthMm: 560, heightMm: 760 }, { widthMm: 280, heightMm: 380 }], lots: [{ name: 'March', since: '2026-03-09' }, { name: 'September', since: '2026-09-21', notes: 'A little warmer in tone' }],
    }, 'Takes two coats without cockling. Let it hang overnight before coating in winter.'),
    buffPaper: await put('papers', 'Loft vellum, 160 g', { weightGramsPerM2: 160, surface: 'hot-pressed', fibre: 'Cotton and flax', sizing: 'Internal', alkalineReserve: 'yes', pretreatment: 'Bath in 2 % citric acid, rinse, dry flat: the alkaline reserve bleaches iron processes.', coatingMillilitresPerM2: 26, sizes: [{ widthMm: 500, heightMm: 650 }] }),
    cyanotype: await put('sensitizers', 'Cyanotype, two parts', {
      process: 'cyanotype', parts: [{ name: 'A', madeOn: '2026-10-12', amount: '250 ml', substances: [{ substance: 'Ferric ammonium citrate', amount: '50 g' }] }, { name: 'B', madeOn: '2026-10-12', amount: '250 ml', substances: [{ substance: 'Potassium ferricyanide', amount: '20 g' }] }],
      mixing: 'Equal parts, just before coating, under tungsten light.', keeps: 'Parts: half a year. Mixed: the evening', keptIn: 'Brown bottles, bottom shelf of the dark cupboard', safetySheet: 'Binder on the sink, tabs 1 and 2',
    }, 'Never bring part B together with strong acid. Gloves, and the window tilted open.'),
    vanDyke: await put('sensitizers', 'Van Dyke, ready mixed', { process: 'van-dyke', parts: [{ name: 'Stock', madeOn: '2026-11-02', amount: '200 ml' }], keeps: 'Three months in the dark', keptIn: 'Brown bottle, locked cabinet', safetySheet: 'Binder on the sink, tab 5' }, 'Silver nitrate stains and burns: gloves and goggles, and the sheet in the binder first.'),
    kallitype: await put('sensitizers', 'Kallitype, two parts', { process: 'kallitype', parts: [{ name: 'Iron', madeOn: '2026-11-16', amount: '100 ml' }, { name: 'Silver', madeOn: '2026-11-16', amount: '100 ml' }], mixing: 'Equal parts by drops, right before coating.', keptIn: 'Brown bottles, locked cabinet', safetySheet: 'Binder on the sink, tabs 5 and 6' }),
    film: await put('films', 'Clear film, coated', { thicknessMicrometres: 135, coatedSide: 'The side that sticks to a moist finger', dryingMinutes: 20, baseDensityUv: 0.09, sizes: [{ widthMm: 210, heightMm: 297 }, { widthMm: 297, heightMm: 420 }], lots: [{ name: 'Box 14', since: '2026-10-05' }] }),
    inkjet: await put('inkjets', 'The long inkjet', { model: 'Eight inks, sheets to 432 mm', inks: 'Pigment, three greys', nativePixelsPerInch: [360, 720], widestSheetMm: 432, unprintableMm: { top: 3, right: 3, bottom: 14, left: 3 }, scaleX: 1, scaleY: 1.002, paths }, 'Nozzle check every Monday. Stands beside the stairs, not in the coating room.'),
    lamp: await put('lamps', 'Tube box under the window', { source: 'tubes', peakNanometres: 368, watts: 180, distanceMm: 75, warmUpMinutes: 4, integrator: 'no', burnedHours: 410, renewedOn: '2025-02-17', evenness: 'Corners 8 % below the middle', shielding: 'Lid switch, brushed curtain at the front' }, 'The lid switch turns it off. Do not wedge it open.'),
    sun: await put('lamps', 'The quay at noon', { source: 'sun', integrator: 'yes', evenness: 'Even, but for the crane’s shadow after three' }, 'Frames face south; the light meter counts units.'),
    scanner: await put('scanners', 'Flatbed on the loft', { kind: 'flatbed', pixelsPerInch: 600, bitDepth: 16, transparency: 'no', area: { widthMm: 216, heightMm: 297 }, corrections: 'off' }),
  }
}
export type DemoShelf = Awaited<ReturnType<typeof fillShelf>>
