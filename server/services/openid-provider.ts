import { allowInsecureRequests, authorizationCodeGrant, AuthorizationResponseError, ClientError, ClientSecretBasic, ClientSecretPost, discovery, fetchUserInfo, ResponseBodyError, type ClientAuth, type Configuration } from 'openid-client'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'
import { log } from '../log'

/** What the provider says of a person. */
export interface Claims { issuer: string, subject: string, email?: string, emailVerified: boolean, name?: string, signedInAt?: number }
export interface Expected { state: string, nonce: string, codeVerifier: string }

const answerSeconds = 10
const noAnswer = new Set(['OAUTH_TIMEOUT', 'OAUTH_RESPONSE_IS_NOT_CONFORM'])
let known: Promise<Configuration> | undefined

export const openIdName = (): string | null => readSettings().OIDC_ISSUER ? readSettings().OIDC_NAME : null

/** The provider's own description of itself, asked for once; a failure is not kept. */
export async function provider(): Promise<Configuration> {
  const { OIDC_ISSUER, OIDC_CLIENT_ID, OIDC_CLIENT_SECRET } = readSettings()
  if (!OIDC_ISSUER) throw new ComputeError('not_found', 'This installation has no OpenID Connect provider.')
  const issuer = new URL(OIDC_ISSUER)
  const options = { timeout: answerSeconds, execute: issuer.protocol === 'http:' ? [allowInsecureRequests] : [] } // on loopback only: the settings see to it
  known ??= discovery(issuer, OIDC_CLIENT_ID!, undefined, clientAuth(OIDC_CLIENT_SECRET!), options)
  known.catch(() => known = undefined)
  return await known.catch(unreachable)
}

/** In the way that the provider takes; Basic where it names none (OpenID Connect Discovery 1.0, 3). */
const clientAuth = (secret: string): ClientAuth => (server, client, body, headers) => {
  const takesPost = server.token_endpoint_auth_methods_supported?.includes('client_secret_post')
  return (takesPost ? ClientSecretPost : ClientSecretBasic)(secret)(server, client, body, headers)
}

/** Exchanges what came back in the address for what the provider says of the person. State, nonce, PKCE and signature are checked by the library. */
export async function claimsFrom(address: URL, { state, nonce, codeVerifier }: Expected): Promise<Claims> {
  const configuration = await provider()
  try {
    const tokens = await authorizationCodeGrant(configuration, address, { expectedState: state, expectedNonce: nonce, pkceCodeVerifier: codeVerifier, idTokenExpected: true })
    const told = tokens.claims()!
    // Address and whether it was verified are taken from one place: one must not vouch for the other's.
    const about = told.email === undefined && configuration.serverMetadata().userinfo_endpoint ? await fetchUserInfo(configuration, tokens.access_token, told.sub) : told
    return { issuer: told.iss, subject: told.sub, email: text(about.email), emailVerified: about.email_verified === true, name: text(about.name), signedInAt: told.auth_time }
  }
  catch (error) {
    if (error instanceof AuthorizationResponseError) throw new ComputeError('openid_refused', `${openIdName()} did not sign you in: it was broken off there, or not allowed.`)
    if (error instanceof ResponseBodyError || (error instanceof ClientError && !noAnswer.has(error.code ?? ''))) {
      log('warn', 'openid.refused', { error })
      throw new ComputeError('openid_refused', `What ${openIdName()} sent back does not belong to this sign-in. Start again.`)
    }
    return unreachable(error)
  }
}

function unreachable(error: unknown): never {
  log('warn', 'openid.unreachable', { error })
  throw new ComputeError('openid_unreachable', `${openIdName()} does not answer. Try again later, or sign in another way.`)
}

const text = (value: unknown): string | undefined => typeof value === 'string' && value.trim() ? value.trim() : undefined
