import { z } from 'zod'
import { warning } from './curves'
import { endpoint } from './endpoint'
import { fraction } from './primitives'
import { cause } from './wedges'

const figures = z.object({ median: z.number(), p95: z.number() })
/** L* at the tone that shows it most: within patches, between patches, from the middle to the side. */
const evenness = z.object({ texture: z.number().nullable(), mottle: z.number(), gradient: z.number(), gradientDegrees: z.number(), light: z.object({ right: z.number(), down: z.number(), edges: z.number() }) })
/** A wedge printed through a curve against the curve’s aim, evened out along tone; `noiseAlone` is what a perfect curve would show. */
const check = z.object({
  greatest: z.number(), greatestAtTone: fraction, mean: z.number(), noiseAlone: figures,
  points: z.array(z.object({ tone: fraction, aimed: z.number(), printed: z.number(), low: z.number(), high: z.number() })),
})
const mix = z.object({
  inkColor: z.string(), whiteFrom: fraction.nullable(), whiteFromLow: fraction.nullable(), whiteFromHigh: fraction.nullable(),
  range: z.number(), roughness: z.number(), grain: z.number().nullable(),
})
const trial = z.object({ paperLightness: z.number(), mixes: z.array(mix), recommended: z.string().nullable(), why: z.string() })

/** What a reading tells besides its patches; each part is null where its wedge does not tell it. */
export const findings = z.object({ causes: z.array(cause), evenness: evenness.nullable(), check: check.nullable(), inkTrial: trial.nullable(), warnings: z.array(warning) })
export type Findings = z.infer<typeof findings>

export const findingEndpoints = {
  findings: endpoint({ method: 'GET', path: '/api/studios/:studio/readings/:reading/findings', access: 'member', summary: 'Causes, evenness, the check of a curve, the best ink mix: what a reading tells besides its patches.', answers: { 200: findings } }),
}
