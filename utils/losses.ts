import type { TonalLosses } from '#shared/tone/losses'

const leastShare = 0.0005
const asShare = (share: number) => formatPercent(share, share < 0.1 ? 1 : 0)

/** What the print cannot show, as one or two sentences: "The lightest 1.8 % prints as bare paper. Shadows all hold." */
export function lossSentence({ barePaper, deepest }: TonalLosses): string {
  const [light, dark] = [barePaper >= leastShare, deepest >= leastShare]
  if (!light && !dark) return 'Every tone holds.'
  if (!dark) return `The lightest ${asShare(barePaper)} prints as bare paper. Shadows all hold.`
  if (!light) return `The darkest ${asShare(deepest)} prints as the deepest tone. Highlights all hold.`
  return `The lightest ${asShare(barePaper)} prints as bare paper, the darkest ${asShare(deepest)} as the deepest tone.`
}
