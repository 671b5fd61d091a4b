import { describe, expect, it } from 'vitest'
import { wedgeBody, wedgeKinds } from '../../../shared/schemas/wedges'
import { emptyWedgeDraft, sayStrip, wedgeOrderOf } from '../../../utils/wedge-order'

const baseExposure = { value: 260, unit: 's' as const, low: null, high: null, since: '2026-05-12T10:00:00Z' }
const curveInUse = { id: '018f0000-0000-7000-8000-000000000001', version: 2, calibrated: true, blackLightness: 22, whiteLightness: 95 }

describe('an order for a wedge or guide', () => {
  it.each(wedgeKinds)('of kind %s is what the service takes, and holds nothing of the others', (kind) => {
    const order = wedgeOrderOf(emptyWedgeDraft(kind, baseExposure), { baseExposure, curveInUse })
    expect(wedgeBody.safeParse(order).error).toBeUndefined()
    const own = { 'numbered': ['steps'], 'ink-trial': ['inkMixes'], 'exposure-strip': ['exposureStrip'], 'step-tablet': ['tablet'] }[kind as string] ?? []
    expect(Object.keys(order).sort()).toEqual(['kind', 'page', ...own].sort())
  })
  it('names the curve in use only when it is wanted', () => {
    expect(wedgeOrderOf({ ...emptyWedgeDraft('scattered', null), isThroughCurve: true }, { baseExposure: null, curveInUse })).toMatchObject({ throughCurveId: curveInUse.id })
    expect(wedgeOrderOf({ ...emptyWedgeDraft('scattered', null), isThroughCurve: true }, { baseExposure: null, curveInUse: null })).not.toHaveProperty('throughCurveId')
  })
  it('puts the known base exposure about at the eighth of ten windows, seven half stops above the first', () => {
    expect(emptyWedgeDraft('exposure-strip', baseExposure).firstExposure * 2 ** 3.5).toBeCloseTo(260, -1)
  })
  it('says where the strip ends: nine half stops above its beginning', () => {
    expect(sayStrip(20, 's')).toBe('10 windows from 20 s to about 7 min 33 s, each half a stop more than the one before.')
  })
})
