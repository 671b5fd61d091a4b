import type { ShelfItem, ShelfKind } from '#shared/schemas/shelf'
import { formatLengthMm, type SizeMm } from '#shared/sheet/sizes'
import type { LengthUnit } from '~/composables/usePreferences'
import { pathText } from './bench-words'
import { figureLocale, formatDecimal } from './figures'
import { showSize } from './lengths'
import type { LotDraft, PartDraft } from './shelf-draft'
import { fieldsOf, type FactField } from './shelf-fields'
import type { NamedPath } from '#shared/schemas/shelf-facts'

/** The six drawers in the order in which a print meets them. */
export const drawerWords: Record<ShelfKind, { name: string, singular: string, one: string, empty: string, nameHint: string, notesHint: string, another: string }> = {
  papers: { name: 'Papers', singular: 'a paper', one: 'paper', empty: 'No paper yet. Add the one you coat most often: its name is enough to start.', nameHint: 'As you call it at the table.', notesHint: 'How it coats, how it behaves in water.', another: 'another paper, weight or surface' },
  sensitizers: { name: 'Sensitizers', singular: 'a sensitizer', one: 'sensitizer', empty: 'No sensitizer yet. Add what you coat with, part by part.', nameHint: 'Such as cyanotype, two parts.', notesHint: 'How it is coated, what to watch for.', another: 'other substances or amounts' },
  films: { name: 'Films', singular: 'a film', one: 'film', empty: 'No film yet. Add what the inkjet prints on, and which side.', nameHint: 'As it stands on the box.', notesHint: 'How much ink it bears, how it is stored.', another: 'another film' },
  inkjets: { name: 'Inkjets', singular: 'an inkjet', one: 'inkjet', empty: 'No inkjet yet. Add it with the path that your files take to it.', nameHint: 'As you call it, or where it stands.', notesHint: 'Last nozzle check, what it likes and does not.', another: 'another machine or other inks' },
  lamps: { name: 'Lamps', singular: 'a lamp', one: 'lamp', empty: 'No lamp yet. Add tubes, LEDs or the sun, with the distance to the glass.', nameHint: 'As you call it.', notesHint: 'Fans, timer, who has looked after it.', another: 'another lamp or distance' },
  scanners: { name: 'Scanners', singular: 'a scanner', one: 'scanner', empty: 'No scanner yet. Add what reads your prints; then teach it what it sees.', nameHint: 'As you call it.', notesHint: 'Where prints lie on it, what must be off.', another: 'another machine' },
}

const day = (iso: string) => new Intl.DateTimeFormat(figureLocale(), { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' }).format(new Date(iso))
const listed = (parts: (string | undefined | false | 0)[], mark = ', ') => parts.filter(Boolean).join(mark)
const substances = (part: Partial<PartDraft>) => listed((part.substances ?? []).map(({ substance, amount }) => listed([substance, amount], ' ')))

/** One fact in words and figures, its parts on lines of their own. */
function shown(field: FactField, fact: unknown, unit: LengthUnit): string[] {
  const length = (mm: number, name: 'mm' | 'cm' = 'mm') => formatLengthMm(mm, unit === 'inch' ? 'in' : name, figureLocale())
  switch (field.as) {
    case 'figure': return [listed([formatDecimal(fact as number, field.digits), field.unit], ' ')]
    case 'length': return [length(fact as number, field.centimetres ? 'cm' : 'mm')]
    case 'choice': return [field.options[String(fact)] ?? String(fact)]
    case 'day': return [day(fact as string)]
    case 'size': return [showSize(fact as SizeMm, unit)]
    case 'sizes': return [(fact as SizeMm[]).map(size => showSize(size, unit)).join('; ')]
    case 'resolutions': return [`${(fact as number[]).join(', ')} ppi`]
    case 'white': return [listed(([['L*', 'lightness'], ['a*', 'a'], ['b*', 'b']] as const).map(([name, key]) => (fact as Record<string, number>)[key] !== undefined && `${name} ${formatDecimal((fact as Record<string, number>)[key]!, 2)}`))]
    case 'unprintable': return [listed(Object.entries(fact as Record<string, number>).map(([edge, mm]) => `${edge} ${length(mm)}`))]
    case 'lots': return (fact as LotDraft[]).map(({ name, since, notes }) => listed([name, since && `since ${day(since)}`, notes]))
    case 'parts': return (fact as PartDraft[]).map(part => listed([`${part.name}: ${substances(part) || 'not written down'}`, part.amount && `makes ${part.amount}`, part.madeOn && `mixed on ${day(part.madeOn)}`], '; '))
    case 'paths': return (fact as NamedPath[]).map(({ name, ...path }) => listed([name, pathText(path)], ': '))
    default: return [String(fact)]
  }
}

export interface FactLine { key: string, label: string, lines: string[] }

/** All that is known of a thing, in the order of its form. */
export function factLines({ kind, facts }: Pick<ShelfItem, 'kind' | 'facts'>, unit: LengthUnit): FactLine[] {
  const known = facts as Record<string, unknown>
  return fieldsOf(kind).filter(field => known[field.key] !== undefined).map(field => ({ key: field.key, label: field.label, lines: shown(field, known[field.key], unit) }))
}

const sentence = (text: string | undefined) => text?.replace(/\.$/, '')

/** The facts that matter at the table, in one line: empty where only a name is known. */
export function inShort(item: ShelfItem, unit: LengthUnit): string {
  const lines = new Map(factLines(item, unit).map(({ key, lines }) => [key, lines]))
  const of = (key: string) => sentence(lines.get(key)?.[0])
  const after = (key: string, say: (fact: string) => string) => of(key) && say(of(key)!)
  switch (item.kind) {
    case 'papers': return listed([of('maker'), of('weightGramsPerM2'), item.facts.surface !== 'other' && of('surface'), after('sizing', sizing => `sized: ${sizing}`),
      item.facts.alkalineReserve === 'yes' && 'alkaline reserve', item.facts.alkalineReserve === 'no' && 'no alkaline reserve', after('coatingMillilitresPerM2', amount => `drinks ${amount}`), newestLot(item.facts.lots)])
    case 'sensitizers': return listed([item.facts.process !== 'other' && of('process'), ...(item.facts.parts ?? []).map(part => listed([part.name, (part.substances ?? []).map(s => s.substance).join(', ')], ': '))], '; ')
    case 'films': return listed([of('maker'), of('thicknessMicrometres'), of('coatedSide'), after('dryingMinutes', time => `dry after ${time}`), after('baseDensityUv', density => `base ${density} in UV`), newestLot(item.facts.lots)])
    case 'inkjets': return listed([of('model'), of('inks'), of('nativePixelsPerInch'), item.facts.paths?.length && (item.facts.paths.length === 1 ? 'one path' : `${item.facts.paths.length} paths`)])
    case 'lamps': return listed([of('source'), of('peakNanometres'), of('distanceMm'), after('warmUpMinutes', time => `${time} warm-up`), item.facts.integrator === 'yes' && 'counts light units'])
    case 'scanners': return listed([of('model'), of('kind'), of('pixelsPerInch'), of('bitDepth'), item.facts.corrections && `corrections ${item.facts.corrections}`])
  }
}

/** The lot that came last: the last dated one, else the last written down. */
function newestLot(lots: { name: string, since?: string }[] = []): string | undefined {
  const dated = lots.filter(lot => lot.since).sort((a, b) => a.since!.localeCompare(b.since!))
  const newest = dated.at(-1) ?? lots.at(-1)
  return newest && `lot ${newest.name}`
}
