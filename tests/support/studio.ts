import { randomUUID } from 'node:crypto'
import { inject } from 'vitest'
import type {} from './provided-context'

/** The application of this vitest worker. */
export function application() {
  const all = inject('applications')
  return all[(Number(process.env.VITEST_POOL_ID) - 1) % all.length]!
}

// Tests read answers' fields by name; the contract itself is checked by the service (CHECK_ANSWERS).
// eslint-disable-next-line @typescript-eslint/no-explicit-any
export interface Answer { status: number, headers: Headers, body: any, text: string }
export interface CallOptions { json?: unknown, body?: BodyInit, headers?: Record<string, string> }

/** Somebody with a browser's cookies, who calls the service over HTTP. */
export class Agent {
  private cookies = new Map<string, string>()
  constructor(readonly address = application().address) {}

  async fetch(method: string, path: string, { json, body, headers = {} }: CallOptions = {}): Promise<Response> {
    const response = await fetch(new URL(path, this.address), {
      method, redirect: 'manual',
      body: json === undefined ? body : JSON.stringify(json),
      headers: { ...json === undefined ? {} : { 'content-type': 'application/json' }, ...this.cookies.size ? { cookie: this.cookieHeader() } : {}, ...headers },
    })
    for (const cookie of response.headers.getSetCookie()) {
      const [, name, value] = /^([^=]+)=([^;]*)/.exec(cookie)!
      if (value) this.cookies.set(name!, value)
      else this.cookies.delete(name!)
    }
    return response
  }

  /** Calls and reads the whole answer; `body` is parsed when it is JSON. */
  async call(method: string, path: string, options?: CallOptions): Promise<Answer> {
    const response = await this.fetch(method, path, options)
    const text = await response.text()
    const isJson = response.headers.get('content-type')?.includes('json')
    return { status: response.status, headers: response.headers, text, body: isJson && text ? JSON.parse(text) : undefined }
  }

  get = (path: string, options?: CallOptions) => this.call('GET', path, options)
  post = (path: string, json?: unknown, options?: CallOptions) => this.call('POST', path, { json, ...options })
  patch = (path: string, json?: unknown, options?: CallOptions) => this.call('PATCH', path, { json, ...options })
  delete = (path: string, options?: CallOptions) => this.call('DELETE', path, options)

  cookieHeader() {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  }
}

/** Signs up a new person with a studio of their own, by real HTTP. Every test makes its own. */
export async function newStudio(name = 'Rope Works Studio', address = application().address) {
  const agent = new Agent(address)
  const email = `${randomUUID()}@ropeworks.example`
  const password = `slow water ${randomUUID()}`
  const answer = await agent.post('/api/auth/register', { name: 'Ines Marlow', email, password, studioName: name })
  if (answer.status !== 201) throw new Error(`Signing up answered ${answer.status}: ${answer.text}`)
  const { user, studio } = answer.body
  return { agent, studio, ids: { user: user.id as string, studio: studio.id as string }, root: `/api/studios/${studio.id}`, email, password }
}
