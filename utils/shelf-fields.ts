// Longer than most: the one list of what the screens ask about things on the shelf, drawer by drawer, and nothing else.
import type { ShelfFacts, ShelfKind } from '#shared/schemas/shelf'
import { limits } from '#shared/schemas/limits'
import { shelfLimits } from '#shared/schemas/shelf-limits'
import { processNames } from './words'

type Shape
  = { as: 'line' | 'text' | 'day' | 'sizes' | 'size' | 'resolutions' | 'unprintable' | 'white' | 'lots' | 'parts' | 'paths' }
    | { as: 'figure', unit?: string, bounds: readonly [number, number], digits: number }
    | { as: 'length', boundsMm: readonly [number, number], centimetres?: boolean }
    | { as: 'choice', options: Record<string, string>, numeric?: boolean }
/** One fact as the screens ask for it and show it. */
export type FactField<K extends string = string> = Shape & { key: K, label: string, hint?: string }
export interface FactSection<K extends string = string> { title: string, says?: string, folded?: boolean, fields: FactField<K>[] }

const side = [limits.sideMinMm, limits.sideMaxMm] as const
const yesNo = { yes: 'yes', no: 'no' }
const lots = { key: 'lots', label: 'Lots', as: 'lots' } as const
const sizes = { key: 'sizes', label: 'Sheet sizes', as: 'sizes' } as const
const maker = { key: 'maker', label: 'Maker, as it stands on the pack', as: 'line' } as const

export const factSections: { [K in ShelfKind]: FactSection<keyof ShelfFacts[K] & string>[] } = {
  papers: [
    { title: 'The sheet', fields: [
      maker,
      { key: 'weightGramsPerM2', label: 'Weight', as: 'figure', unit: 'g/m²', bounds: shelfLimits.weightGramsPerM2, digits: 1 },
      { key: 'surface', label: 'Surface', as: 'choice', options: { 'hot-pressed': 'hot-pressed', 'cold-pressed': 'cold-pressed', 'rough': 'rough', 'other': 'another' } },
      { key: 'fibre', label: 'Fibre', as: 'line', hint: 'Cotton, linen, wood, mulberry.' },
      { key: 'coatedSide', label: 'Side to coat, and how to see it', as: 'line' },
      sizes,
    ] },
    { title: 'How it takes a coating', folded: true, says: 'sizing, alkaline reserve, millilitres', fields: [
      { key: 'sizing', label: 'Sizing', as: 'line', hint: 'By the mill, and your own.' },
      { key: 'alkalineReserve', label: 'Alkaline reserve', as: 'choice', options: yesNo, hint: 'Alkali works against iron coatings and fades Prussian blue: from memory. Try a strip of the sheet as it is first.' },
      { key: 'pretreatment', label: 'What is done to it first', as: 'text' },
      { key: 'coatingMillilitresPerM2', label: 'Coating it drinks', as: 'figure', unit: 'mL/m²', bounds: shelfLimits.coatingMillilitresPerM2, digits: 1, hint: '1.5 mL on an 8 × 10 in sheet are 29 mL/m².' },
    ] },
    { title: 'White and lots', folded: true, says: 'measured white, what was bought when', fields: [
      { key: 'white', label: 'Bare paper, measured', as: 'white', hint: 'L*, a*, b* under D50. L* alone will do.' }, lots,
    ] },
  ],
  sensitizers: [
    { title: 'What it is mixed of', says: 'The safety data sheet of each substance goes before anything that is written here.', fields: [
      { key: 'process', label: 'For', as: 'choice', options: processNames },
      { key: 'parts', label: 'Parts', as: 'parts' },
      { key: 'mixing', label: 'How the parts are mixed', as: 'text', hint: 'Equal volumes, ten drops and one, what comes in last.' },
    ] },
    { title: 'Keeping', folded: true, says: 'how long, in what, where the safety data sheets lie', fields: [
      { key: 'keeps', label: 'How long it keeps', as: 'line' },
      { key: 'keptIn', label: 'Kept in', as: 'line', hint: 'Bottle, label, cupboard.' },
      { key: 'safetySheet', label: 'Where its safety data sheets lie', as: 'line' },
    ] },
  ],
  films: [
    { title: 'The film', fields: [
      maker,
      { key: 'coatedSide', label: 'Side to print on, and how to see it', as: 'line', hint: 'The duller side; a moistened fingertip sticks to it.' },
      { key: 'dryingMinutes', label: 'Dry after', as: 'figure', unit: 'min', bounds: shelfLimits.dryingMinutes, digits: 0, hint: '30 minutes until you know it; ten are the least: common practice, no source. Print cards say what stands here.' },
      { key: 'thicknessMicrometres', label: 'Thickness', as: 'figure', unit: 'µm', bounds: shelfLimits.thicknessMicrometres, digits: 0 },
      sizes,
      { key: 'rollWidthMm', label: 'Width of the roll', as: 'length', boundsMm: side },
    ] },
    { title: 'Measured, and lots', folded: true, says: 'density of the bare film', fields: [
      { key: 'baseDensityUv', label: 'UV density of the bare film', as: 'figure', bounds: shelfLimits.baseDensityUv, digits: 3, hint: 'Absolute, in your lamp’s light.' }, lots,
    ] },
  ],
  inkjets: [
    { title: 'The machine', fields: [
      { key: 'model', label: 'Model, as it stands on the machine', as: 'line' },
      { key: 'inks', label: 'Inks', as: 'line', hint: 'Pigment or dye, which blacks.' },
      { key: 'nativePixelsPerInch', label: 'Native resolutions', as: 'resolutions', hint: 'What it takes without rescaling: often 360 and 720, or 300 and 600.' },
      { key: 'widestSheetMm', label: 'Widest sheet', as: 'length', boundsMm: side },
    ] },
    { title: 'Paths', says: 'Ways in which film files reach it. A bench takes one of them; a negative that goes another way gets a warning.', fields: [{ key: 'paths', label: 'Its paths', as: 'paths' }] },
    { title: 'Edges and scale', folded: true, says: 'what it can’t print, how true it is', fields: [
      { key: 'unprintableMm', label: 'Edges it can’t print', as: 'unprintable' },
      { key: 'scaleX', label: 'Scale across the sheet’s way', as: 'figure', bounds: shelfLimits.scaleFactor, digits: 5, hint: 'Length wanted ÷ length printed: 200 mm that print as 199.6 mm make 1.002. For files that are composed for this inkjet; all others keep their true size.' },
      { key: 'scaleY', label: 'Scale along the sheet’s way', as: 'figure', bounds: shelfLimits.scaleFactor, digits: 5 },
    ] },
  ],
  lamps: [
    { title: 'The light', fields: [
      { key: 'source', label: 'What shines', as: 'choice', options: { 'uv-led': 'UV LED', 'tubes': 'fluorescent tubes', 'metal-halide': 'metal halide', 'mercury': 'mercury vapour', 'sun': 'the sun', 'other': 'something else' } },
      { key: 'peakNanometres', label: 'Peak wavelength', as: 'figure', unit: 'nm', bounds: shelfLimits.peakNanometres, digits: 0 },
      { key: 'distanceMm', label: 'Distance to the glass', as: 'length', boundsMm: shelfLimits.distanceMm, centimetres: true },
      { key: 'warmUpMinutes', label: 'Warm-up', as: 'figure', unit: 'min', bounds: shelfLimits.warmUpMinutes, digits: 1 },
      { key: 'integrator', label: 'Counts light units (integrator)', as: 'choice', options: yesNo },
      { key: 'shielding', label: 'How it is shielded, how it is opened', as: 'line', hint: 'Off or shielded before opening. Never look into it.' },
    ] },
    { title: 'Age and evenness', folded: true, says: 'hours, new tubes, dark corners', fields: [
      { key: 'burnedHours', label: 'Hours burned', as: 'figure', unit: 'h', bounds: shelfLimits.burnedHours, digits: 0 },
      { key: 'renewedOn', label: 'New tubes or LEDs since', as: 'day' },
      { key: 'watts', label: 'Power', as: 'figure', unit: 'W', bounds: shelfLimits.watts, digits: 1 },
      { key: 'evenness', label: 'Evenness', as: 'line', hint: 'Where it is weaker, and by how much.' },
    ] },
  ],
  scanners: [
    { title: 'The scanner', fields: [
      { key: 'model', label: 'Model, as it stands on it', as: 'line' },
      { key: 'kind', label: 'What it is', as: 'choice', options: { 'flatbed': 'flatbed', 'camera-stand': 'camera on a stand', 'film-scanner': 'film scanner', 'other': 'something else' } },
      { key: 'pixelsPerInch', label: 'Prints are scanned at', as: 'figure', unit: 'ppi', bounds: shelfLimits.scannerPixelsPerInch, digits: 0 },
      { key: 'bitDepth', label: 'Bit depth', as: 'choice', numeric: true, options: { 8: '8 bit', 16: '16 bit' } },
      { key: 'corrections', label: 'Automatic corrections', as: 'choice', options: { off: 'off', on: 'on' }, hint: 'Off, or a wedge can’t be trusted.' },
    ] },
    { title: 'More', folded: true, says: 'size, transparency, program, profile', fields: [
      { key: 'area', label: 'Largest original', as: 'size' },
      { key: 'transparency', label: 'Scans film from above', as: 'choice', options: yesNo },
      { key: 'program', label: 'Program and its settings', as: 'line' },
      { key: 'colourProfile', label: 'Colour profile', as: 'line' },
    ] },
  ],
}

export const fieldsOf = (kind: ShelfKind): FactField[] => factSections[kind].flatMap(section => section.fields as FactField[])
