import type { z } from 'zod'
import type { Bench, benchBody, path, recipe, Process } from '#shared/schemas/benches'
import { parseDecimal } from './figures'
import { readSeconds } from './exposure-time'

type Recipe = z.infer<typeof recipe>
export type Path = z.infer<typeof path>
type BenchBody = z.input<typeof benchBody>

export const materialFields = ['paperId', 'sensitizerId', 'filmId', 'inkjetId', 'lampId'] as const
export type MaterialField = typeof materialFields[number]

export interface PathDraft { fileKind: Path['fileKind'] | '', bitDepth: '' | '8' | '16', sentBy: string, pixelsPerInch: number | null, mediaType: string, quality: string, colourAdjustment: Path['colourAdjustment'] | '', filmSide: string }

/** What the form holds: every field there, an empty string or null where nothing is written down. */
export interface BenchDraft extends Record<MaterialField, string> {
  name: string
  process: Process
  recipe: Omit<Required<Recipe>, 'coats' | 'coatedWith' | 'developerTemperatureCelsius'> & { coats: number | null, coatedWith: Recipe['coatedWith'] | '', developerTemperatureCelsius: number | null }
  path: PathDraft
  inkColor: string
  readingChannel: Bench['readingChannel']
  mirror: boolean
  exposure: { unit: 's' | 'dose', text: string }
}

export const emptyDraft = (): BenchDraft => ({
  name: '', process: 'cyanotype', paperId: '', sensitizerId: '', filmId: '', inkjetId: '', lampId: '',
  recipe: { coats: null, coatedWith: '', drying: '', contact: '', contrastAgent: '', developer: '', developerTemperatureCelsius: null, firstBath: '', clearing: '', toner: '' },
  path: pathDraftOf({}),
  inkColor: '#000000', readingChannel: 'lightness', mirror: true, exposure: { unit: 's', text: '' },
})

const emptyPath: PathDraft = { fileKind: '', bitDepth: '', sentBy: '', pixelsPerInch: null, mediaType: '', quality: '', colourAdjustment: '', filmSide: '' }
/** What the form holds of a path, also of a named one. */
export function pathDraftOf({ bitDepth, ...path }: Path): PathDraft {
  const known = Object.fromEntries(Object.entries(path).filter(([key]) => key in emptyPath))
  return { ...emptyPath, ...known, bitDepth: bitDepth ? `${bitDepth}` : '' }
}

/** A path as the service takes it: what is not written down is left out. */
export const pathOf = (draft: PathDraft): Path => written({ ...draft, bitDepth: draft.bitDepth === '' ? '' : Number(draft.bitDepth) }) as Path

export function draftOf(bench: Bench): BenchDraft {
  const empty = emptyDraft()
  return {
    ...empty, name: bench.name, process: bench.process,
    ...Object.fromEntries(materialFields.map(field => [field, bench[field] ?? ''])) as Record<MaterialField, string>,
    recipe: { ...empty.recipe, ...bench.recipe },
    path: pathDraftOf(bench.path),
    inkColor: bench.ink.color, readingChannel: bench.readingChannel, mirror: bench.mirror,
  }
}

/** The combination as the service takes it: what is not written down is left out. */
export function combinationOf(draft: BenchDraft): Omit<BenchBody, 'id' | 'baseExposure'> {
  return {
    name: draft.name, process: draft.process,
    ...written(Object.fromEntries(materialFields.map(field => [field, draft[field]])) as Record<MaterialField, string>),
    recipe: written(draft.recipe) as Recipe,
    path: pathOf(draft.path),
    ink: { color: draft.inkColor }, readingChannel: draft.readingChannel, mirror: draft.mirror,
  }
}

const written = <T extends object>(fields: T): Partial<T> =>
  Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== '' && value !== null)) as Partial<T>

/** The base exposure of the form: undefined when nothing is typed, null when it cannot be read. */
export function exposureOf(exposure: BenchDraft['exposure']): BenchBody['baseExposure'] | null {
  if (exposure.text.trim() === '') return undefined
  const value = exposure.unit === 's' ? readSeconds(exposure.text) : parseDecimal(exposure.text)
  return value !== null && value > 0 ? { value, unit: exposure.unit } : null
}
