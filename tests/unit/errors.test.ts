import { describe, expect, it } from 'vitest'
import { ComputeError, errorCodes } from '#shared/errors'

describe('error codes', () => {
  it('are snake_case and answer with a status from 400 to 599', () => {
    for (const [code, [status, message]] of Object.entries(errorCodes)) {
      expect(code).toMatch(/^[a-z]+(_[a-z]+)*$/)
      expect(status).toBeGreaterThanOrEqual(400)
      expect(status).toBeLessThan(600)
      expect(message.length).toBeLessThanOrEqual(40)
    }
  })

  it('travel with the sentence and the issues of what was thrown', () => {
    const error = new ComputeError('invalid_input', 'The width is missing.', [{ path: 'widthMm', message: 'Required' }])
    expect(error).toMatchObject({ code: 'invalid_input', message: 'The width is missing.', issues: [{ path: 'widthMm', message: 'Required' }] })
  })
})
