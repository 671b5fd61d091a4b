import type { z } from 'zod'
import type { Endpoint } from '#shared/schemas/endpoint'
import { ApiError, apiErrorFrom, unreachable } from '~/utils/api-error'

type Input<E, K extends string> = E extends Record<K, infer S extends z.ZodType> ? z.input<S> : never
type AnswerOf<E extends Endpoint> = {
  [S in keyof E['answers']]: S extends 200 | 201 | 202 | 204 ? (E['answers'][S] extends z.ZodType ? z.output<E['answers'][S]> : undefined) : never
}[keyof E['answers']]
type Params = Record<string, string>

export interface CallOptions<E extends Endpoint> {
  params?: Params
  query?: Input<E, 'query'>
  body?: Input<E, 'body'>
  signal?: AbortSignal
  headers?: Record<string, string>
}

/** The address of a row of the contract: `:names` filled in, the query appended. */
export function addressOf(row: Pick<Endpoint, 'path'>, params: Params = {}, query: object = {}): string {
  const path = row.path.replace(/:(\w+)/g, (_, name: string) => {
    const value = params[name]
    if (value === undefined) throw new Error(`${row.path} needs ${name}`)
    return encodeURIComponent(value)
  })
  const pairs = Object.entries(query).filter(([, value]) => value !== undefined).map(([key, value]) => [key, String(value)])
  return pairs.length ? `${path}?${new URLSearchParams(pairs)}` : path
}

/** Calls rows of the contract; what goes wrong is thrown as an `ApiError` with a sentence for people. */
export function useApi() {
  async function send(row: Endpoint, options: CallOptions<Endpoint>): Promise<Response> {
    const address = addressOf(row, options.params, options.query as object | undefined)
    const body = options.body === undefined ? undefined : JSON.stringify(options.body)
    const headers: Record<string, string> = { ...body === undefined ? {} : { 'content-type': 'application/json' }, ...options.headers }
    const answer = await fetch(address, { method: row.method, headers, body, signal: options.signal }).catch((error: Error) => {
      throw error.name === 'AbortError' ? error : unreachable()
    })
    if (!answer.ok) throw await apiErrorFrom(answer)
    return answer
  }

  async function call<const E extends Endpoint>(row: E, options: CallOptions<E> = {}): Promise<AnswerOf<E>> {
    const answer = await send(row, options as CallOptions<Endpoint>)
    const text = await answer.text() // 204, and some 202, say nothing more
    return (text ? JSON.parse(text) : undefined) as AnswerOf<E>
  }

  /** For rows that answer with a file. */
  const fetchFile = <const E extends Endpoint>(row: E, options: CallOptions<E> = {}) => send(row, options as CallOptions<Endpoint>)

  return { call, fetchFile }
}

/** Sends a form with files in it, telling how much is sent (0…1). */
export function uploadForm<const E extends Endpoint>(row: E, params: Params, form: FormData, onProgress: (share: number) => void, signal?: AbortSignal): Promise<AnswerOf<E>> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    request.open(row.method, addressOf(row, params))
    request.responseType = 'json'
    request.upload.onprogress = event => event.lengthComputable && onProgress(event.loaded / event.total)
    request.onerror = () => reject(unreachable())
    request.onabort = () => reject(new DOMException('The upload was stopped.', 'AbortError'))
    request.onload = () => request.status < 300 ? resolve(request.response) : reject(ApiError.fromBody(request.status, request.response))
    signal?.addEventListener('abort', () => request.abort())
    request.send(form)
  })
}
