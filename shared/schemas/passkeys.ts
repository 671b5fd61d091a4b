import { z } from 'zod'
import { endpoint } from './endpoint'
import { limits } from './limits'
import { me } from './people'
import { id, instant, name } from './primitives'

export const passkey = z.object({ id, name: z.string(), backedUp: z.boolean(), createdAt: instant, lastUsedAt: instant.nullable() })
export type Passkey = z.infer<typeof passkey>

const base64url = (maxLength: number) => z.string().regex(/^[\w-]+$/, 'This is no base64url.').max(maxLength)
const credentialId = base64url(limits.credentialIdLength)
const transport = z.enum(['ble', 'cable', 'hybrid', 'internal', 'nfc', 'smart-card', 'usb'])
const attachment = z.enum(['platform', 'cross-platform'])
const credential = { id: credentialId, rawId: credentialId, type: z.literal('public-key'), authenticatorAttachment: attachment.optional(), clientExtensionResults: z.unknown().transform(() => ({})) }

/** `RegistrationResponseJSON` of WebAuthn Level 3, 5.1: what is not checked is left out. */
export const newCredential = z.object({ ...credential, response: z.object({
  clientDataJSON: base64url(4000), attestationObject: base64url(60_000), transports: z.array(z.string().max(40)).max(20).transform(given => given.filter(one => transport.safeParse(one).success) as z.infer<typeof transport>[]).optional(),
}) })
/** `AuthenticationResponseJSON` of WebAuthn Level 3, 5.1. */
export const assertion = z.object({ ...credential, response: z.object({
  clientDataJSON: base64url(4000), authenticatorData: base64url(8000), signature: base64url(4000), userHandle: base64url(200).optional(),
}) })

/** What the browser's own functions take (`PublicKeyCredentialCreationOptionsJSON`, `…RequestOptionsJSON`). */
const browserOptions = z.looseObject({ challenge: z.string() })
const signInBody = z.strictObject({ credential: assertion })
const again = '/api/auth/sign-in-again' as const

/** Passkeys beside passwords. Where none can work (no HTTPS, or no name), their routes say `passkeys_impossible`. */
export const passkeyEndpoints = {
  waysIn: endpoint({ method: 'GET', path: '/api/auth/ways', access: 'public', summary: 'Which ways of signing in there are; `passkeys.origin` is the address where passkeys work, null where they can’t; `openId.name` is the word on its button.', answers: { 200: z.object({ passkeys: z.object({ origin: z.string().nullable() }), openId: z.object({ name: z.string() }).nullable() }) } }),
  ownWaysIn: endpoint({ method: 'GET', path: '/api/me/ways', access: 'session', only: 'session', summary: 'Which of them one’s own account has.', answers: { 200: z.object({ password: z.boolean(), passkeys: z.number().int(), openId: z.boolean() }) } }),
  listPasskeys: endpoint({ method: 'GET', path: '/api/me/passkeys', access: 'session', only: 'session', summary: 'One’s passkeys, the oldest first.', answers: { 200: z.object({ items: z.array(passkey) }) } }),
  passkeyOptions: endpoint({ method: 'POST', path: '/api/me/passkeys/options', access: 'fresh-session', account: true, summary: 'What the browser needs to make a passkey; works for five minutes.', answers: { 200: browserOptions } }),
  addPasskey: endpoint({ method: 'POST', path: '/api/me/passkeys', access: 'fresh-session', account: true, summary: 'Keep the passkey that the browser made.', body: z.strictObject({ name, credential: newCredential }), answers: { 201: passkey } }),
  removePasskey: endpoint({ method: 'DELETE', path: '/api/me/passkeys/:passkey', access: 'fresh-session', summary: 'Remove a passkey; the last way in stays.', answers: { 204: null } }),
  passkeySignInOptions: endpoint({ method: 'POST', path: '/api/auth/passkeys/options', access: 'public', summary: 'What the browser needs to sign in with a passkey; works once, for five minutes.', answers: { 200: browserOptions } }),
  passkeySignIn: endpoint({ method: 'POST', path: '/api/auth/passkeys/sign-in', access: 'public', summary: 'Sign in with a passkey.', body: signInBody, answers: { 200: me } }),
  passkeyAgainOptions: endpoint({ method: 'POST', path: `${again}/passkey-options`, access: 'session', only: 'session', summary: 'What the browser needs to prove who one is by a passkey.', answers: { 200: browserOptions } }),
  passkeyAgain: endpoint({ method: 'POST', path: `${again}/passkey`, access: 'session', only: 'session', summary: 'Prove who one is by a passkey, for what asks for a fresh sign-in.', body: signInBody, answers: { 204: null } }),
}
