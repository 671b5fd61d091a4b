import type { InStudio } from './negatives'

/** A bench of one's own, not yet printed on. */
export async function newBench({ agent, root }: InStudio, changes: Record<string, unknown> = {}) {
  const answer = await agent.post(`${root}/benches`, { name: 'Mill paper', process: 'cyanotype', ...changes })
  if (answer.status !== 201) throw new Error(`Setting up a bench answered ${answer.status}: ${answer.text}`)
  return answer.body
}

/** A wedge on a bench of its own, or on the one that is named; small unless asked otherwise. */
export async function newWedge(studio: InStudio, { benchId, ...body }: Record<string, unknown> & { benchId?: string } = {}) {
  const bench = benchId ?? (await newBench(studio)).id
  const answer = await studio.agent.post(`${studio.root}/benches/${bench}/wedges`, { page: { widthMm: 150, heightMm: 115 }, ...body })
  if (answer.status !== 201) throw new Error(`Laying out a wedge answered ${answer.status}: ${answer.text}`)
  return answer.body
}
