import { newNegative, newPhoto } from '../../support/negatives'
import { newPersonIn } from '../../support/people'
import { Agent, newStudio } from '../../support/studio'

/** Lightness rising with the level, as a wedge of 21 steps gives it. */
export const wedgeValues = Array.from({ length: 21 }, (_, i) => ({ level: i / 20, value: 24 + 68 * (i / 20) ** 1.3 }))

/** A studio with somebody in each role, and somebody outside who owns another studio. */
export async function makeWorld() {
  const owner = await newStudio()
  const [technician, member, outsider] = await Promise.all([newPersonIn(owner.ids.studio, 'technician'), newPersonIn(owner.ids.studio, 'member'), newStudio()])
  const make = async (path: string, json: unknown): Promise<string> => {
    const answer = await owner.agent.post(`${owner.root}/${path}`, json)
    if (answer.status > 202) throw new Error(`${path} answered ${answer.status}: ${answer.text}`)
    return answer.body.id
  }
  // Photos and negatives are private: here they are the member's.
  const membersOwn = { agent: member.agent, root: owner.root }
  return {
    newPhoto: async (): Promise<string> => (await newPhoto(membersOwn)).id,
    newNegative: async (): Promise<string> => (await newNegative(membersOwn)).id,
    owner, technician, member, outsider, anonymous: new Agent(), make,
    newPaper: () => make('papers', { name: 'Cold-pressed cotton' }),
    newBench: () => make('benches', { name: 'Window bench', process: 'cyanotype' }),
    newReading: (bench: string) => make(`benches/${bench}/readings`, { unit: 'lightness', values: wedgeValues }),
    async newWedge() {
      return make(`benches/${await this.newBench()}/wedges`, { page: { widthMm: 210, heightMm: 297 } })
    },
    async newWedgePrint() {
      return make(`wedges/${await this.newWedge()}/prints`, {})
    },
    async newCurve() {
      const bench = await this.newBench()
      return { bench, curve: await make(`benches/${bench}/curves`, { readingIds: [await this.newReading(bench)] }) }
    },
  }
}
export type World = Awaited<ReturnType<typeof makeWorld>>
