import { randomInt } from 'node:crypto'
import type { z } from 'zod'
import type { WedgeGrid } from '#shared/calibration/wedge-layout'
import type { WedgePlan } from '#shared/calibration/wedge/plan'
import { gridForSheet, gridName } from '#shared/calibration/wedge/scattered-page'
import { ComputeError } from '#shared/errors'
import type { wedgeBody, WedgeKind } from '#shared/schemas/wedges'

type Body = z.infer<typeof wedgeBody>

/** Which kinds take a field, and why it must come with them. */
const fieldsOf = {
  throughCurveId: { kinds: ['scattered', 'numbered'], needed: null },
  steps: { kinds: ['numbered'], needed: null },
  inkMixes: { kinds: ['ink-trial'], needed: 'Name two to six ink mixes to try.' },
  exposureStrip: { kinds: ['exposure-strip'], needed: 'Say how long the first step of the strip is exposed.' },
  tablet: { kinds: ['step-tablet'], needed: 'Measure your step tablet: how wide and how high is one step?' },
} satisfies Record<string, { kinds: WedgeKind[], needed: string | null }>

/** The plan that a new wedge is laid out from. Throws `invalid_input` for what its kind does not take or is missing. */
export function planWedge(body: Body): WedgePlan {
  requireFieldsOfKind(body)
  const seed = randomInt(2 ** 31 - 1)
  switch (body.kind) {
    case 'scattered': return { kind: 'scattered', grid: gridFor(body), seed }
    case 'numbered': return { kind: 'numbered', steps: body.steps ?? 21 }
    case 'ink-trial': return { kind: 'ink-trial', grid: gridFor(body), seed, mixes: body.inkMixes!.map(mix => mix.toLowerCase()) }
    case 'ink-load': return { kind: 'ink-load', grid: guideGrid(body) }
    case 'exposure-strip': return { kind: 'exposure-strip', grid: guideGrid(body), strip: body.exposureStrip! }
    case 'step-tablet': return { kind: 'step-tablet', grid: guideGrid(body), tablet: body.tablet! }
  }
}

function requireFieldsOfKind(body: Body): void {
  for (const [field, { kinds, needed }] of Object.entries(fieldsOf)) {
    const [given, fits] = [body[field as keyof typeof fieldsOf] !== undefined, (kinds as WedgeKind[]).includes(body.kind)]
    if (given && !fits) throw refusal(field, `This belongs to another kind: ${kinds.join(' or ')}.`)
    if (!given && fits && needed) throw refusal(field, needed)
  }
  const { inkMixes } = body
  if (inkMixes && new Set(inkMixes.map(mix => mix.toLowerCase())).size < inkMixes.length) throw refusal('inkMixes', 'Name each mix once.')
}

const refusal = (path: string, message: string) => new ComputeError('invalid_input', message, [{ path, message }])

const gridFor = ({ page }: Body): WedgeGrid => gridName(gridForSheet(page.widthMm, page.heightMm))

/** Guides gain nothing from more than half an A4. */
const guideGrid = (body: Body): WedgeGrid => gridFor(body) === '16x12' ? '16x12' : '24x16'
