import type { ShelfItem, ShelfKind } from '#shared/schemas/shelf'
import type { SizeMm } from '#shared/sheet/sizes'
import { pathDraftOf, pathOf, type Path, type PathDraft } from './bench-draft'
import { fieldsOf, type FactField } from './shelf-fields'

export interface LotDraft { name: string, since: string, notes: string }
export interface PartDraft { name: string, madeOn: string, amount: string, substances: { substance: string, amount: string }[] }
export interface PathRowDraft { name: string, path: PathDraft }
/** What a form holds of a fact: never undefined, so that every field has something to show. */
export type FactDraft = string | number | null | number[] | SizeMm[] | LotDraft[] | PartDraft[] | PathRowDraft[] | Record<string, number | null>
export interface ShelfDraft { name: string, notes: string, facts: Record<string, FactDraft> }

export const blankLot = (): LotDraft => ({ name: '', since: '', notes: '' })
export const blankSubstance = () => ({ substance: '', amount: '' })
export const blankPart = (): PartDraft => ({ name: '', madeOn: '', amount: '', substances: [blankSubstance()] })
export const blankPath = (): PathRowDraft => ({ name: '', path: pathDraftOf({}) })

type Stored = Record<string, unknown>
const listOf = <T>(stored: unknown, draft: (row: Stored) => T): T[] => ((stored ?? []) as Stored[]).map(draft)

function factDraft(field: FactField, stored: unknown): FactDraft {
  switch (field.as) {
    case 'figure': case 'length': return (stored ?? null) as number | null
    case 'choice': return stored === undefined ? '' : String(stored)
    case 'sizes': return listOf(stored, size => ({ ...size }) as unknown as SizeMm)
    case 'resolutions': return [...(stored ?? []) as number[]]
    case 'size': return { widthMm: null, heightMm: null, ...stored as object }
    case 'white': return { lightness: null, a: null, b: null, ...stored as object }
    case 'unprintable': return { top: null, right: null, bottom: null, left: null, ...stored as object }
    case 'lots': return listOf(stored, lot => ({ ...blankLot(), ...lot }))
    case 'parts': return listOf(stored, part => ({ ...blankPart(), ...part, substances: listOf(part.substances, s => ({ ...blankSubstance(), ...s })) }))
    case 'paths': return listOf(stored, ({ name, ...path }) => ({ name: String(name), path: pathDraftOf(path as Path) }))
    default: return (stored ?? '') as string
  }
}

export function shelfDraft(kind: ShelfKind, item?: Pick<ShelfItem, 'name' | 'notes' | 'facts'>): ShelfDraft {
  const facts = (item?.facts ?? {}) as Stored
  return { name: item?.name ?? '', notes: item?.notes ?? '', facts: Object.fromEntries(fieldsOf(kind).map(field => [field.key, factDraft(field, facts[field.key])])) }
}

/**
 * What a form holds as another thing of its kind. Lots, hours and days that are still the old one's stay with it,
 * and it gets a name of its own where none was given.
 */
export function asCopy(kind: ShelfKind, draft: ShelfDraft, old: Pick<ShelfItem, 'name' | 'notes' | 'facts'>): ShelfDraft {
  const [before, blank] = [shelfDraft(kind, old).facts, shelfDraft(kind).facts]
  const isLeft = (key: string) => ['lots', 'burnedHours', 'renewedOn'].includes(key) && JSON.stringify(draft.facts[key]) === JSON.stringify(before[key])
  const facts = Object.fromEntries(Object.entries(draft.facts).map(([key, fact]) => [key, isLeft(key) ? blank[key]! : fact]))
  return { ...draft, name: draft.name === old.name ? `${old.name.slice(0, 110)}, copy` : draft.name, facts }
}

/** The facts as the service takes them: what is not written down is left out, and rows that hold nothing. */
export function writtenFacts(kind: ShelfKind, { facts }: ShelfDraft): Stored {
  return Object.fromEntries(fieldsOf(kind).flatMap((field) => {
    const draft = facts[field.key]
    const fact = pruned(field.as === 'paths' ? (draft as PathRowDraft[]).map(({ name, path }) => ({ name, ...pathOf(path) })) : draft)
    if (fact === undefined) return []
    return [[field.key, field.as === 'choice' && field.numeric ? Number(fact) : fact]]
  }))
}

function pruned(value: unknown): unknown {
  if (value === null || value === undefined) return undefined
  if (typeof value === 'string') return value.trim() || undefined
  if (Array.isArray(value)) return orNothing(value.map(pruned).filter(one => one !== undefined))
  if (typeof value !== 'object') return value
  const entries = Object.entries(value).map(([key, inner]) => [key, pruned(inner)] as const).filter(([, inner]) => inner !== undefined)
  return entries.length ? Object.fromEntries(entries) : undefined
}
const orNothing = (list: unknown[]) => list.length ? list : undefined
