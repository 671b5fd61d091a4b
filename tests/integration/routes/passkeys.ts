import { Authenticator, newPasskey, passkeyOrigin } from '../../support/authenticator'
import { newStudio } from '../../support/studio'
import type { RouteCase } from './route-case'
import type { World } from './world'

async function signed({ anonymous }: World) {
  const { authenticator } = await newPasskey((await newStudio()).agent)
  return { json: { credential: authenticator.get((await anonymous.post('/api/auth/passkeys/options')).body) } }
}
async function made({ owner }: World) {
  const authenticator = new Authenticator(await passkeyOrigin(owner.agent))
  return { json: { name: 'Phone by the sink', credential: authenticator.create((await owner.agent.post('/api/me/passkeys/options')).body) }, status: 201 }
}

/** The owner's own, used again and again: an account has only so many. */
let known: Awaited<ReturnType<typeof newPasskey>> | undefined

export const passkeyCases: RouteCase[] = [
  { file: 'auth/ways.get.ts', row: 'waysIn', good: () => ({}) },
  { file: 'me/ways.get.ts', row: 'ownWaysIn', good: () => ({}) },
  { file: 'me/passkeys/index.get.ts', row: 'listPasskeys', good: () => ({}) },
  { file: 'me/passkeys/options.post.ts', row: 'passkeyOptions', good: () => ({}) },
  {
    file: 'me/passkeys/index.post.ts', row: 'addPasskey', good: made,
    bad: [
      { why: 'what no authenticator made', call: () => ({ json: { name: 'Nothing', credential: { id: 'x', rawId: 'x', type: 'public-key', clientExtensionResults: {}, response: { clientDataJSON: 'x', attestationObject: 'x' } } }, status: 401, code: 'passkey_refused' }) },
      { why: 'no name', call: () => ({ json: { name: ' ', credential: {} }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: 'me/passkeys/[passkey].delete.ts', row: 'removePasskey',
    good: async ({ owner }) => ({ params: { passkey: (await newPasskey(owner.agent)).id }, status: 204 }),
  },
  { file: 'auth/passkeys/options.post.ts', row: 'passkeySignInOptions', good: () => ({}) },
  {
    file: 'auth/passkeys/sign-in.post.ts', row: 'passkeySignIn', good: signed,
    bad: [{ why: 'what no authenticator signed', call: () => ({ json: { credential: { id: 'x', rawId: 'x', type: 'public-key', clientExtensionResults: {}, response: { clientDataJSON: 'x', authenticatorData: 'x', signature: 'x' } } }, status: 401, code: 'passkey_refused' }) }],
  },
  { file: 'auth/sign-in-again/passkey-options.post.ts', row: 'passkeyAgainOptions', good: () => ({}) },
  {
    file: 'auth/sign-in-again/passkey.post.ts', row: 'passkeyAgain',
    good: async ({ owner }) => {
      known ??= await newPasskey(owner.agent)
      return { json: { credential: known.authenticator.get((await owner.agent.post('/api/auth/sign-in-again/passkey-options')).body) }, status: 204 }
    },
    bad: [{ why: 'a challenge that was taken', call: ({ owner }) => ({ json: { credential: known!.authenticator.get({ challenge: Buffer.from(owner.ids.user).toString('base64url').slice(0, 43) }) }, status: 401, code: 'passkey_refused' }) }],
  },
]
