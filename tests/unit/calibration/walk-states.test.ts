import { describe, expect, it } from 'vitest'
import { isDoneByRecords, stepNow, type WalkRecords } from '../../../shared/calibration/walk-states'
import { walkSteps, type WalkStep } from '../../../shared/schemas/calibration'

const nothing: WalkRecords = { isPathWritten: false, hasBaseExposure: false, stepWedges: 0, prints: 0, unreadPrints: 0, readings: 0, unfittedReadings: 0, inkTrialReadings: 0, checkReadings: 0, hasDraftAhead: false, hasCurveInUse: false }
const done = (records: Partial<WalkRecords>) => walkSteps.filter(step => isDoneByRecords(step, { ...nothing, ...records }))

describe('isDoneByRecords', () => {
  const cases: [string, Partial<WalkRecords>, WalkStep[]][] = [
    ['nothing is done on an empty bench', {}, []],
    ['a written path and a base exposure are', { isPathWritten: true, hasBaseExposure: true }, ['path', 'base-exposure']],
    ['a print of the wedge settles the path', { stepWedges: 1, prints: 1, unreadPrints: 1 }, ['path', 'wedge', 'expose']],
    ['a reading shows all the handwork before it', { readings: 1, unfittedReadings: 1 }, ['path', 'ink-load', 'wedge', 'expose', 'read']],
    ['a further print asks to be read', { readings: 1, prints: 2, unreadPrints: 1, hasCurveInUse: true }, ['path', 'ink-load', 'wedge', 'expose', 'curve']],
    ['a draft waits to be used', { readings: 1, hasDraftAhead: true }, ['path', 'ink-load', 'wedge', 'expose', 'read']],
    ['a wedge through the curve is the check', { readings: 2, hasCurveInUse: true, checkReadings: 1 }, ['path', 'ink-load', 'wedge', 'expose', 'read', 'curve', 'check']],
  ]
  it.each(cases)('%s', (_, records, expected) => expect(done(records)).toEqual(expected))
})

describe('stepNow', () => {
  const steps = (open: WalkStep[]) => walkSteps.map(step => ({ step, state: open.includes(step) ? 'open' as const : 'done' as const, optional: step === 'ink-trial' }))
  it('is the first open step', () => expect(stepNow(steps(['wedge', 'expose']))).toBe('wedge'))
  it('passes over an optional one', () => expect(stepNow(steps(['ink-trial', 'read']))).toBe('read'))
  it('is none once only the optional one is left', () => expect(stepNow(steps(['ink-trial']))).toBeNull())
})
