import { createError } from 'h3'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { ComputeError, errorCodes, type ErrorCode } from '#shared/errors'
import { errorAnswer } from '#shared/schemas/primitives'
import { errorAnswerOf } from '../../../server/utils/answer-error'

describe('an error answer', () => {
  it.each(Object.entries(errorCodes))('of %s carries its status, its short message, its sentence and its code', (code, [status, message]) => {
    const answer = errorAnswerOf(new ComputeError(code as ErrorCode, 'Do this instead.'))
    expect(answer).toEqual({ statusCode: status, statusMessage: message, message: 'Do this instead.', data: { code } })
    expect(errorAnswer.parse(answer)).toEqual(answer)
  })

  it('names each field that a schema refuses, by its path', () => {
    const error = z.strictObject({ size: z.strictObject({ widthMm: z.number() }) }).safeParse({ size: { widthMm: 'wide' }, tone: 1 }).error
    expect(errorAnswerOf(error)).toMatchObject({ statusCode: 422, data: { code: 'invalid_input', issues: [{ path: 'size.widthMm' }, { path: 'tone' }] } })
  })

  it('tells which reference leads nowhere in this studio', () => {
    const detail = 'Key (studio_id, paper_id)=(018f0000-0000-7000-8000-000000000000, 018f0000-0000-7000-8000-000000000001) is not present in table "papers".'
    const error = Object.assign(new Error('Failed query'), { cause: Object.assign(new Error(), { code: '23503', detail }) })
    expect(errorAnswerOf(error).data).toMatchObject({ code: 'invalid_input', issues: [{ path: 'paperId' }] })
  })

  it('refuses characters that PostgreSQL can’t store', () => {
    expect(errorAnswerOf(Object.assign(new Error(), { code: '22021' })).data.code).toBe('invalid_input')
    expect(errorAnswerOf(Object.assign(new Error(), { code: '22P05' })).data.code).toBe('invalid_input')
  })

  it('keeps what it does not know to itself', () => {
    const answer = errorAnswerOf(new Error('relation "secrets" does not exist'))
    expect(answer).toMatchObject({ statusCode: 500, data: { code: 'internal' } })
    expect(JSON.stringify(answer)).not.toContain('secrets')
    expect(errorAnswerOf(createError({ statusCode: 404 })).data.code).toBe('not_found')
  })
})
