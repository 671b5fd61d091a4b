import { getHeader, getRequestHeader, type H3Event } from 'h3'
import { ComputeError } from '#shared/errors'

export const bodyLimits = { jsonBytes: 2_000_000, readingsTextBytes: 10_000_000 } as const

export function mediaType(event: H3Event): string {
  return (getHeader(event, 'content-type') ?? '').split(';')[0]!.trim().toLowerCase()
}

/** The body as UTF-8 text. Stops reading at `maxBytes`, before anything is parsed; the connection stays open for the answer. */
export async function readText(event: H3Event, maxBytes: number): Promise<string> {
  const tooLarge = () => new ComputeError('body_too_large', `The body is larger than ${maxBytes / 1e6} MB, which is the most that is read here.`)
  if ((getRequestHeader(event, 'content-encoding') ?? 'identity') !== 'identity') throw new ComputeError('unsupported_media', 'Send the body without compression.')
  if (Number(getHeader(event, 'content-length') ?? 0) > maxBytes) throw tooLarge()
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of event.node.req.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
    bytes += chunk.length
    if (bytes > maxBytes) throw tooLarge()
    chunks.push(chunk)
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(chunks))
  }
  catch {
    throw new ComputeError('malformed_body', 'The body is not UTF-8 text.')
  }
}

export async function readJson(event: H3Event): Promise<unknown> {
  const text = await readText(event, bodyLimits.jsonBytes)
  try {
    return JSON.parse(text)
  }
  catch {
    throw new ComputeError('malformed_body', 'The body is not valid JSON.')
  }
}
