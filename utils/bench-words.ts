import type { Bench } from '#shared/schemas/benches'
import type { NamedPath } from '#shared/schemas/shelf-facts'
import { formatDecimal } from './figures'

export const channelNames: Record<Bench['readingChannel'], string> = {
  'lightness': 'Lightness L*', 'density-blue': 'Density through blue, for yellow layers', 'density-green': 'Density through green, for magenta layers',
  'density-red': 'Density through red, for cyan layers', 'colour-path': 'Along the bench’s own colour path',
}

const coatedWith = { brush: 'brush', rod: 'rod', float: 'floated', other: 'another way' } as const
const coatCounts = ['', 'One coat', 'Two coats', 'Three coats', 'Four coats']

/** What of the recipe is written down, in the order of the work. */
export function recipeLines(recipe: Bench['recipe']): { name: string, text: string }[] {
  const coats = recipe.coats ? coatCounts[recipe.coats] ?? `${recipe.coats} coats` : ''
  const temperature = recipe.developerTemperatureCelsius === undefined ? '' : `${formatDecimal(recipe.developerTemperatureCelsius, 1)} °C`
  return [
    { name: 'Coating', text: [coats, recipe.coatedWith ? coatedWith[recipe.coatedWith] : ''].filter(Boolean).join(', ') },
    { name: 'Drying and moisture', text: recipe.drying }, { name: 'Contact', text: recipe.contact }, { name: 'Contrast agent', text: recipe.contrastAgent },
    { name: 'Developer', text: [recipe.developer, temperature].filter(Boolean).join(' at ') },
    { name: 'First bath', text: recipe.firstBath }, { name: 'Clearing', text: recipe.clearing }, { name: 'Toner', text: recipe.toner },
  ].filter((line): line is { name: string, text: string } => Boolean(line.text))
}

const fileKinds = { pdf: 'PDF', tiff: 'TIFF', png: 'PNG' } as const

/** `PDF, 600 ppi, best`: the path's settings in the order one sets them. */
export function pathText(path: Bench['path']): string {
  const adjustment = path.colourAdjustment === 'off' ? 'colour adjustment off' : path.colourAdjustment === 'on' ? 'colour adjustment on' : ''
  return [
    path.fileKind ? fileKinds[path.fileKind] : '', path.bitDepth ? `${path.bitDepth} bit` : '', path.pixelsPerInch ? `${path.pixelsPerInch} ppi` : '',
    path.sentBy ? `by ${path.sentBy}` : '', path.mediaType, path.quality, adjustment, path.filmSide,
  ].filter(Boolean).join(', ')
}

const pathKeys = ['fileKind', 'bitDepth', 'sentBy', 'pixelsPerInch', 'mediaType', 'quality', 'colourAdjustment', 'filmSide'] as const

/** The name under which an inkjet keeps exactly this path; undefined where it keeps none such, or nothing is written down. */
export const pathNameOf = (paths: NamedPath[], path: Bench['path']): string | undefined =>
  Object.keys(path).length === 0 ? undefined : paths.find(one => pathKeys.every(key => one[key] === path[key]))?.name
