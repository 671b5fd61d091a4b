import type { ShelfKind } from '#shared/schemas/shelf'

/** The six drawers in the order in which a print meets them. */
export const drawerWords: Record<ShelfKind, { name: string, singular: string, empty: string, notesHint: string }> = {
  papers: { name: 'Papers', singular: 'a paper', empty: 'No paper yet: what you coat and print on.', notesHint: 'Weight, surface, sizing, lot, which side.' },
  sensitizers: { name: 'Sensitizers', singular: 'a sensitizer', empty: 'No sensitizer yet: what you coat with.', notesHint: 'Parts, mixed when, where its safety data sheet lies.' },
  films: { name: 'Films', singular: 'a film', empty: 'No film yet: what the inkjet prints on.', notesHint: 'Coated side, sheet size, drying time.' },
  inkjets: { name: 'Inkjets', singular: 'an inkjet', empty: 'No inkjet yet: what prints the film.', notesHint: 'Where it stands, inks, last nozzle check.' },
  lamps: { name: 'Lamps', singular: 'a lamp', empty: 'No lamp yet: tubes, LEDs or the sun.', notesHint: 'Distance to the glass, hours, how it is shielded.' },
  scanners: { name: 'Scanners', singular: 'a scanner', empty: 'No scanner yet: what reads the prints.', notesHint: 'Corrections that must be off, resolution.' },
}
