import { H3Error, setResponseHeader, setResponseStatus, type H3Event } from 'h3'
import { z } from 'zod'
import { log } from '../log'
import { ComputeError, errorCodes, type ErrorCode, type Issue } from '#shared/errors'

export interface ErrorAnswer {
  statusCode: number
  statusMessage: string
  message: string
  data: { code: ErrorCode, issues?: Issue[] }
}

/** The one mapper from what is thrown to the contract's error answer. What it does not know becomes `internal`. */
export function errorAnswerOf(error: unknown): ErrorAnswer {
  const known = asComputeError(error)
  const [statusCode, statusMessage] = errorCodes[known.code]
  return { statusCode, statusMessage, message: known.message, data: { code: known.code, ...(known.issues?.length ? { issues: known.issues } : {}) } }
}

export function answerError(event: H3Event, error: unknown): ErrorAnswer {
  const answer = errorAnswerOf(error)
  // The rest of a refused body is read away, on a connection that we don't close first, whatever was asked: a sender in the middle of it gets the answer, not a reset.
  event.node.req.resume()
  if (!event.node.req.complete) event.node.res.shouldKeepAlive = true
  if (answer.statusCode === 500) log('error', 'request.error', { requestId: event.context.requestId, error })
  if (event.node.res.headersSent) {
    event.node.res.destroy() // half an answer must not look like a whole one
    return answer
  }
  if (answer.statusCode === 429) setResponseHeader(event, 'Retry-After', 60)
  setResponseStatus(event, answer.statusCode, answer.statusMessage)
  setResponseHeader(event, 'Cache-Control', 'no-store')
  return answer
}

function asComputeError(error: unknown): ComputeError {
  if (error instanceof ComputeError) return error
  if (error instanceof z.ZodError) return new ComputeError('invalid_input', 'Some of what was sent can\'t be used. Look at the fields named here.', error.issues.map(issueOf))
  if (error instanceof H3Error && error.statusCode === 404) return new ComputeError('not_found', 'There is nothing under this address.')
  return ofDatabase(error) ?? new ComputeError('internal', 'Something went wrong on our side. Nothing was changed; try again.')
}

const issueOf = (issue: z.core.$ZodIssue): Issue => ({
  path: issue.code === 'unrecognized_keys' ? [...issue.path, issue.keys[0]].join('.') : issue.path.join('.'),
  message: issue.message,
})

/** PostgreSQL's refusals that bad input causes: a reference that leads nowhere in this studio, characters it can't store. */
function ofDatabase(error: unknown): ComputeError | undefined {
  const { code, detail } = ((error as { cause?: unknown })?.cause ?? error ?? {}) as { code?: string, detail?: string }
  if (code === '23503') {
    const column = /^Key \((?:[^)]*, )?"?(\w+)"?\)=/.exec(detail ?? '')?.[1] ?? ''
    const path = column.replace(/_(\w)/g, (_, letter: string) => letter.toUpperCase())
    return new ComputeError('invalid_input', 'A record named here is not in this studio.', [{ path, message: 'There is no such record in this studio.' }])
  }
  if (code === '22021' || code === '22P05') return new ComputeError('invalid_input', 'The text holds a character that can\'t be kept (a null character).')
  return undefined
}
