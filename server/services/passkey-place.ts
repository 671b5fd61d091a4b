import { isIP } from 'node:net'
import { ComputeError } from '#shared/errors'
import { readSettings, type Settings } from '../config'

export interface PasskeyPlace { origin: string, rpId: string }

const loopbackHosts = new Set(['127.0.0.1', '::1', 'localhost', '0.0.0.0', '::'])

/**
 * Where passkeys work: browsers bind them to a name, and want HTTPS, except at `localhost`. Without a configured address that is
 * `localhost` at our own port, so that passkeys can be tried on the machine itself. Null where they can't work.
 */
export function passkeyPlace({ NUXT_PUBLIC_URL, HOST, PORT }: Pick<Settings, 'NUXT_PUBLIC_URL' | 'HOST' | 'PORT'> = readSettings()): PasskeyPlace | null {
  if (NUXT_PUBLIC_URL) return placeOf(NUXT_PUBLIC_URL)
  return loopbackHosts.has(HOST) ? placeOf(`http://localhost:${PORT}`) : null
}

function placeOf(address: string): PasskeyPlace | null {
  const { protocol, hostname, origin } = new URL(address)
  if (isIP(hostname.replace(/^\[|\]$/g, ''))) return null
  return protocol === 'https:' || hostname === 'localhost' || hostname.endsWith('.localhost') ? { origin, rpId: hostname } : null
}

export function requirePasskeyPlace(): PasskeyPlace {
  const place = passkeyPlace()
  if (!place) throw new ComputeError('passkeys_impossible', 'Passkeys need HTTPS and a name: this installation is opened by a bare address or without HTTPS. Sign in with your password.')
  return place
}
