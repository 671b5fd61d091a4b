import { z } from 'zod'
import { endpoint } from './endpoint'
import { limits } from './limits'
import { letterToken } from './people'

/** A page of ours to go to after signing in; never an address elsewhere. */
export const ownPath = z.string().max(limits.lineLength).regex(/^\/(?:s\/[^/\\]|account$)/, 'This is no page to go on to.')
const atProvider = z.object({ url: z.string() })

/** Signing in with a configured OpenID Connect provider. The browser goes to `url`; what comes back is answered with a page. */
export const openIdEndpoints = {
  openIdStart: endpoint({ method: 'POST', path: '/api/auth/openid/start', access: 'public', summary: 'Where the browser goes to sign in with the provider; works for ten minutes, in this browser.', body: z.strictObject({ next: ownPath.optional(), invitationToken: letterToken.optional() }), answers: { 200: atProvider } }),
  openIdBack: endpoint({ method: 'GET', path: '/api/auth/openid/back', access: 'public', summary: 'Where the provider sends the browser back to: on to a page, signed in, or to one that says what went wrong.', answers: { 302: null } }),
  openIdAgain: endpoint({ method: 'POST', path: '/api/auth/sign-in-again/openid', access: 'session', only: 'session', summary: 'Where the browser goes to prove who one is at the provider.', body: z.strictObject({ next: ownPath }), answers: { 200: atProvider } }),
}
