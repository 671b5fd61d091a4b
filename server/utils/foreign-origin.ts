import type { H3Event } from 'h3'
import { getHeader } from 'h3'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS'])

/** Our own origins: the configured address, else the loopback addresses this process listens on. Never taken from Host. */
export function ownOrigins({ NUXT_PUBLIC_URL, HOST, PORT } = readSettings()): Set<string> {
  if (NUXT_PUBLIC_URL) return new Set([new URL(NUXT_PUBLIC_URL).origin])
  const hosts = ['127.0.0.1', 'localhost', '[::1]', ...(/^(0\.0\.0\.0|::)$/.test(HOST) ? [] : [HOST])]
  return new Set(hosts.map(host => new URL(`http://${host.includes(':') && !host.startsWith('[') ? `[${host}]` : host}:${PORT}`).origin))
}

/**
 * Refuses an unsafe request that another site's page has sent (cross-site request forgery).
 * A request with a Bearer header carries its own proof and its cookies are ignored, so it can't be forged.
 */
export function refuseForeignOrigin(event: H3Event): void {
  if (safeMethods.has(event.method) || bearerToken(event) !== undefined) return
  const origin = getHeader(event, 'origin')
  const site = getHeader(event, 'sec-fetch-site')
  const foreign = (origin !== undefined && !ownOrigins().has(origin)) || (site !== undefined && site !== 'same-origin' && site !== 'none')
  if (foreign) throw new ComputeError('foreign_origin', 'This request came from another site\'s page, so it was refused. Open Emulside itself and try again.')
}

/** The token of an `Authorization: Bearer` header, or undefined. */
export function bearerToken(event: H3Event): string | undefined {
  return /^bearer\s+(.*)$/i.exec(getHeader(event, 'authorization') ?? '')?.[1]
}
