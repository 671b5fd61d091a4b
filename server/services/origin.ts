import { readSettings } from '../config'

/** Where people open this installation; for links in letters and codes, never taken from a request. */
export function publicOrigin({ NUXT_PUBLIC_URL, HOST, PORT } = readSettings()): string {
  if (NUXT_PUBLIC_URL) return new URL(NUXT_PUBLIC_URL).origin
  const host = /^(0\.0\.0\.0|::)$/.test(HOST) ? '127.0.0.1' : HOST
  return new URL(`http://${host.includes(':') ? `[${host}]` : host}:${PORT}`).origin
}
