import type { WedgeKind } from '#shared/schemas/wedges'

/** How the screens say what can be put on film to calibrate a bench. */
export const wedgeNames: Record<WedgeKind, string> = {
  'scattered': 'Scattered wedge', 'numbered': 'Numbered wedge', 'ink-trial': 'Ink trial',
  'ink-load': 'Ink load and drying', 'exposure-strip': 'Exposure strip', 'step-tablet': 'Guide for a step tablet',
}
export const wedgeSays: Record<WedgeKind, string> = {
  'scattered': 'Hundreds of small patches, scattered so that uneven coating and light don’t look like tone. Read from a scan or a phone picture.',
  'numbered': '21 or 31 large steps, twice, for a spot instrument or the eye. You type the values in.',
  'ink-trial': 'Ramps of several ink mixes beside each other.',
  'ink-load': 'Squares, fine lines and strips to wipe: judged by hand and eye.',
  'exposure-strip': 'Two rows of clear windows that are covered one by one.',
  'step-tablet': 'A frame for your own step tablet, with the marks that let its print be read.',
}

/** Those whose prints make a curve. */
export const stepWedgeKinds: readonly WedgeKind[] = ['scattered', 'numbered']
export const isStepWedge = ({ kind }: { kind: WedgeKind }) => stepWedgeKinds.includes(kind)

/** For lists, in the order of a calibration. */
export const wedgeKindsInOrder = (['scattered', 'numbered', 'ink-load', 'exposure-strip', 'step-tablet', 'ink-trial'] as const).map(value => ({ value: value as WedgeKind, label: wedgeNames[value] }))
