import { browserSupportsWebAuthn, startAuthentication, startRegistration } from '@simplewebauthn/browser'
import { contract } from '#build/client-contract'

/** Passkeys in this browser. What goes wrong, or is broken off, is thrown as an `ApiError` with a sentence. */
export function usePasskeys() {
  const { call } = useApi()
  const canUse = () => browserSupportsWebAuthn()

  const sign = (options: { challenge: string }) =>
    startAuthentication({ optionsJSON: options as Parameters<typeof startAuthentication>[0]['optionsJSON'] }).catch(orSay)

  async function add(name: string) {
    const optionsJSON = await call(contract.passkeyOptions) as unknown as Parameters<typeof startRegistration>[0]['optionsJSON']
    const credential = await startRegistration({ optionsJSON }).catch(orSay)
    return await call(contract.addPasskey, { body: { name, credential } })
  }

  async function signIn() {
    return await call(contract.passkeySignIn, { body: { credential: await sign(await call(contract.passkeySignInOptions)) } })
  }

  async function signInAgain() {
    await call(contract.passkeyAgain, { body: { credential: await sign(await call(contract.passkeyAgainOptions)) } })
  }

  return { canUse, add, signIn, signInAgain }
}

/** The browser's own dialog told the person what was wrong; here it is said how to go on. */
function orSay(error: Error): never {
  const isKnown = 'code' in error && error.code === 'ERROR_AUTHENTICATOR_PREVIOUSLY_REGISTERED'
  throw new ApiError(0, 'passkey_not_used', isKnown
    ? 'This device has a passkey for your account already.'
    : 'No passkey was used: the browser’s question was closed, timed out, or found none. Try again, or use another way.')
}
