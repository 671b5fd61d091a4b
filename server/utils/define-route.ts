import type { EventHandlerRequest, H3Event } from 'h3'
import { z } from 'zod'
import type { Endpoint } from '#shared/schemas/endpoint'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'
import type { Person, StudioAccess } from '../services/access'
import { enterStudio, requireFreshSession, requirePerson } from '../services/access'
import { answerError } from './answer-error'
import { refuseForeignOrigin } from './foreign-origin'

type Parsed<S> = S extends z.ZodType ? z.output<S> : undefined
type Field<E, K extends string> = E extends Record<K, infer S> ? Parsed<S> : undefined
type InStudio<E extends Endpoint> = E['access'] extends 'member' | 'technician' | 'owner' ? StudioAccess : undefined
type SignedIn<E extends Endpoint> = E['access'] extends 'public' ? undefined : Person

export interface RouteContext<E extends Endpoint> {
  event: H3Event
  person: SignedIn<E>
  studio: InStudio<E>
  query: Field<E, 'query'>
  body: Field<E, 'body'>
  /** a path parameter; one that is no UUID names nothing, so it answers 404 */
  idParam: (name: string) => string
}

const uuid = z.uuid()

/**
 * A route is a row of the contract and one service call: this checks the origin, who calls and in which role,
 * validates query and body, and turns what is thrown into the contract's error answer.
 */
export function defineRoute<const E extends Endpoint>(row: E, handle: (context: RouteContext<E>) => unknown) {
  return defineEventHandler<EventHandlerRequest, Promise<unknown>>(async (event) => {
    try {
      refuseForeignOrigin(event)
      const person = row.access === 'public' ? undefined : await requirePerson(event)
      if (row.access === 'fresh-session') await requireFreshSession(event)
      const studio = row.access === 'member' || row.access === 'technician' || row.access === 'owner'
        ? await enterStudio(person!, getRouterParam(event, 'studio') ?? '', row.access)
        : undefined
      const query = row.query ? row.query.parse(getQuery(event)) : undefined
      const body = row.body && acceptsJson(event, row) ? row.body.parse(await readJson(event)) : undefined
      const idParam = (name: string) => {
        const parsed = uuid.safeParse(getRouterParam(event, name))
        if (!parsed.success) throw new ComputeError('not_found', 'There is nothing under this address.')
        return parsed.data
      }
      const answer = await handle({ event, person, studio, query, body, idParam } as RouteContext<E>)
      if (readSettings().CHECK_ANSWERS) checkAnswer(row, getResponseStatus(event), answer)
      return answer
    }
    catch (error) {
      return answerError(event, error)
    }
  })
}

function acceptsJson(event: H3Event, row: Endpoint): boolean {
  const type = (getHeader(event, 'content-type') ?? '').split(';')[0]!.trim().toLowerCase()
  if (type === 'application/json') return true
  if (row.otherBodies && Object.keys(row.otherBodies).includes(type)) return false
  throw new ComputeError('unsupported_media', 'Send the body as application/json.')
}

async function readJson(event: H3Event): Promise<unknown> {
  const raw = await readRawBody(event, 'utf8')
  try {
    return JSON.parse(raw ?? '')
  }
  catch {
    throw new ComputeError('malformed_body', 'The body is not valid JSON.')
  }
}

function checkAnswer(row: Endpoint, status: number, answer: unknown): void {
  const shape = row.answers[status]
  if (shape instanceof z.ZodType) shape.parse(answer)
  else if (shape === undefined) throw new Error(`${row.method} ${row.path} answered ${status}, which its contract does not name.`)
}
