import type { Bench } from '#shared/schemas/benches'

export const channelNames: Record<Bench['readingChannel'], string> = {
  'lightness': 'Lightness L*', 'density-blue': 'Density through blue, for yellow layers', 'density-green': 'Density through green, for magenta layers',
  'density-red': 'Density through red, for cyan layers', 'colour-path': 'Along the bench’s own colour path',
}

const coatedWith = { brush: 'brush', rod: 'rod', float: 'floated', other: 'another way' } as const
const coatCounts = ['', 'One coat', 'Two coats', 'Three coats', 'Four coats']

/** `One coat, brush. Dried flat overnight. Weak citric first bath.`: what of the recipe is written down. */
export function recipeText(recipe: Bench['recipe']): string {
  const coats = recipe.coats ? coatCounts[recipe.coats] ?? `${recipe.coats} coats` : ''
  const coating = [coats, recipe.coatedWith ? coatedWith[recipe.coatedWith] : ''].filter(Boolean).join(', ')
  const developer = [recipe.developer, recipe.developerTemperatureCelsius === undefined ? '' : `${recipe.developerTemperatureCelsius} °C`].filter(Boolean).join(' at ')
  return [coating, recipe.drying, recipe.contact, recipe.contrastAgent, developer, recipe.firstBath, recipe.clearing, recipe.toner]
    .filter((part): part is string => Boolean(part)).map(sentence).join(' ')
}

const sentence = (text: string) => text[0]!.toUpperCase() + text.slice(1).replace(/\.?$/, '.')

const fileKinds = { pdf: 'PDF', tiff: 'TIFF', png: 'PNG' } as const

/** `PDF, 600 ppi, best`: the path's settings in the order one sets them. */
export function pathText(path: Bench['path']): string {
  const adjustment = path.colourAdjustment === 'off' ? 'colour adjustment off' : path.colourAdjustment === 'on' ? 'colour adjustment on' : ''
  return [
    path.fileKind ? fileKinds[path.fileKind] : '', path.bitDepth ? `${path.bitDepth} bit` : '', path.pixelsPerInch ? `${path.pixelsPerInch} ppi` : '',
    path.sentBy ? `by ${path.sentBy}` : '', path.mediaType, path.quality, adjustment, path.filmSide,
  ].filter(Boolean).join(', ')
}
