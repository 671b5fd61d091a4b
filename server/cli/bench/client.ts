import type { RunningService } from './suite'

/** A person of a studio of their own, signed in at the service. */
export type Client = Awaited<ReturnType<typeof signedIn>>

/** Registers a new person. */
export async function signedIn(address: RunningService['address']) {
  const client = clientAt(address)
  const { studio } = await client.json('POST', '/api/auth/register', { name: 'Bench', email: `${crypto.randomUUID()}@bench.example`, password: crypto.randomUUID() }) as unknown as { studio: { id: string } }
  return { ...client, root: `/api/studios/${studio.id}` }
}

/** Somebody with a cookie of before; `json` throws with what was answered when that was a refusal. */
export function clientAt(address: string, cookie = '') {
  const send = async (method: string, path: string, body?: unknown) => {
    const form = body instanceof FormData
    const headers: Record<string, string> = { cookie, ...body === undefined || form ? {} : { 'content-type': 'application/json' } }
    const response = await fetch(address + path, { method, headers, body: form ? body : body === undefined ? undefined : JSON.stringify(body) })
    const set = response.headers.getSetCookie().map(c => c.split(';')[0]!)
    if (set.length) cookie = set.join('; ')
    return response
  }
  const json = async (method: string, path: string, body?: unknown) => {
    const response = await send(method, path, body)
    if (!response.ok) throw new Error(`${method} ${path} answered ${response.status}: ${await response.text()}`)
    return await response.json() as Record<string, unknown> & { id: string }
  }
  /** a body that is made while it is sent */
  const stream = (method: string, path: string, body: ReadableStream, type: string) =>
    fetch(address + path, { method, body, duplex: 'half', headers: { cookie, 'content-type': type } } as RequestInit)
  return { address, send, json, stream, cookieHeader: () => cookie }
}
