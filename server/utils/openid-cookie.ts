import { deleteCookie, getCookie, setCookie, type H3Event } from 'h3'
import { readSettings } from '../config'
import { openIdMinutes } from '../services/openid'

const name = 'emulside-openid'
/** `lax`: it must come along when the provider's page sends the browser back. */
const settings = () => ({ sameSite: 'lax' as const, httpOnly: true, path: '/api/auth/openid', secure: readSettings().NUXT_PUBLIC_URL?.startsWith('https:') ?? false })

/** Binds a sign-in at the provider to the browser that began it. */
export const keepOpenIdSecret = (event: H3Event, secret: string) => setCookie(event, name, secret, { ...settings(), maxAge: 60 * openIdMinutes })

export function takeOpenIdSecret(event: H3Event): string | undefined {
  const secret = getCookie(event, name)
  deleteCookie(event, name, settings())
  return secret
}
