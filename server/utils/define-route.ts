import { isDeepStrictEqual } from 'node:util'
import type { EventHandlerRequest, H3Event } from 'h3'
import { z } from 'zod'
import type { Endpoint } from '#shared/schemas/endpoint'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'
import type { Person, StudioAccess } from '../services/access'
import { enterStudio, requireAccount, requireOpenClass } from '../services/access'
import { answerError } from './answer-error'
import { refuseForeignOrigin } from './foreign-origin'
import { bodyLimits, mediaType, readJson, readText } from './read-body'
import { requireFreshSession, requirePerson, requireSession } from './require-person'

type Parsed<S> = S extends z.ZodType ? z.output<S> : undefined
type Field<E, K extends string> = E extends Record<K, infer S> ? Parsed<S> : undefined
type InStudio<E extends Endpoint> = E['access'] extends 'member' | 'technician' | 'owner' ? StudioAccess : undefined
type SessionPerson = Person & { session: NonNullable<Person['session']> }
type WithAddress<E extends Endpoint> = E extends { account: true } ? { email: string } : unknown
type SignedIn<E extends Endpoint> = Caller<E> & WithAddress<E>
type Caller<E extends Endpoint> = E['access'] extends 'public' ? undefined : E['access'] extends 'fresh-session' ? SessionPerson : E extends { only: 'session' } ? SessionPerson : Person
type Body<E extends Endpoint> = E extends { otherBodies: object } ? Field<E, 'body'> | undefined : Field<E, 'body'>

export interface RouteContext<E extends Endpoint> {
  event: H3Event
  person: SignedIn<E>
  studio: InStudio<E>
  query: Field<E, 'query'>
  /** the JSON body; undefined where one of `otherBodies` came instead */
  body: Body<E>
  /** the text, where one of `otherBodies` is a text and came */
  text: string | undefined
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
      setResponseHeader(event, 'Cache-Control', 'no-store') // until the route says otherwise
      const callers = await admit(event, row)
      const query = row.query?.parse(getQuery(event))
      const answer = await handle({ event, ...callers, query, ...await readBody(event, row), idParam: idParamOf(event) } as RouteContext<E>)
      if (readSettings().CHECK_ANSWERS) checkAnswer(row, getResponseStatus(event), answer)
      return answer
    }
    catch (error) {
      return answerError(event, error)
    }
  })
}

async function admit(event: H3Event, { method, access, only, fresh, account, afterClass }: Endpoint): Promise<{ person?: Person, studio?: StudioAccess }> {
  if (access === 'public') return {}
  const person = await requirePerson(event)
  if (only === 'session') requireSession(person)
  if (access === 'fresh-session') requireFreshSession(person)
  if (account) requireAccount(person)
  if (access === 'session' || access === 'fresh-session') return { person }
  const studio = await enterStudio(person, getRouterParam(event, 'studio') ?? '', access)
  if (fresh) requireFreshSession(person) // after the studio: what one may not see says 404 first
  if (!['GET', 'HEAD', 'OPTIONS'].includes(method) && !afterClass) requireOpenClass(studio)
  return { person, studio }
}

/** Bodies that are neither JSON nor text (uploads) are left in the stream for the route. */
async function readBody(event: H3Event, row: Endpoint): Promise<{ body?: unknown, text?: string }> {
  if (!row.body && !row.otherBodies) return {}
  const type = mediaType(event)
  if (row.body && type === 'application/json') return { body: row.body.parse(await readJson(event)) }
  const others = Object.keys(row.otherBodies ?? {})
  if (others.includes(type)) return type.startsWith('text/') ? { text: await readText(event, bodyLimits.readingsTextBytes) } : {}
  throw new ComputeError('unsupported_media', `Send the body as ${[...(row.body ? ['application/json'] : []), ...others].join(' or ')}.`)
}

const idParamOf = (event: H3Event) => (name: string): string => {
  const parsed = uuid.safeParse(getRouterParam(event, name))
  if (!parsed.success) throw new ComputeError('not_found', 'There is nothing under this address.')
  return parsed.data
}

/** An answer must fit its contract and carry no field that the contract does not name. */
function checkAnswer(row: Endpoint, status: number, answer: unknown): void {
  const shape = row.answers[status]
  if (shape === undefined) throw new Error(`${row.method} ${row.path} answered ${status}, which its contract does not name.`)
  if (!(shape instanceof z.ZodType)) return
  const sent: unknown = JSON.parse(JSON.stringify(answer))
  if (!isDeepStrictEqual(JSON.parse(JSON.stringify(shape.parse(sent))), sent)) {
    throw new Error(`${row.method} ${row.path} answered fields that its contract does not name.`)
  }
}
