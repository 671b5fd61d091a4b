import { generateKeyPairSync } from 'node:crypto'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import Provider from 'oidc-provider'
import { backAddress, newAccount, openIdClient, type Account } from './openid-accounts'

/**
 * An OpenID Connect provider on loopback (the library oidc-provider). It asks nothing: whom to sign in stands in
 * `login_hint`, which tests add to the address; without it, somebody new with a verified address.
 */
export async function startOpenIdProvider() {
  const server = createServer()
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const issuer = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
  const accounts = new Map<string, Account>()
  const provider = new Provider(issuer, {
    clients: [{ client_id: openIdClient.id, client_secret: openIdClient.secret, redirect_uris: [`${issuer}/unused`], token_endpoint_auth_method: 'client_secret_post' }],
    claims: { openid: ['sub'], email: ['email', 'email_verified'], profile: ['name'] },
    findAccount: (_: unknown, sub: string) => ({ accountId: sub, claims: () => accounts.get(sub) ?? { sub } }),
    interactions: { url: (_: unknown, { uid }: { uid: string }) => `/interaction/${uid}` },
    features: { devInteractions: { enabled: false } },
    cookies: { keys: ['only-for-tests'] },
    jwks: { keys: [{ ...generateKeyPairSync('rsa', { modulusLength: 2048 }).privateKey.export({ format: 'jwk' }), use: 'sig', alg: 'RS256', kid: 'tests' }] },
    ttl: { Interaction: 600, Session: 600, Grant: 600, AccessToken: 600, IdToken: 600 },
  })
  provider.Client.prototype.redirectUriAllowed = address => backAddress.test(address)
  const answer = provider.callback()
  server.on('request', (request, response) => {
    if (!request.url?.startsWith('/interaction/')) return answer(request, response)
    signIn(provider, accounts, request, response).catch(() => response.writeHead(500).end())
  })
  return { issuer, stop: () => new Promise<void>(resolve => (server.closeAllConnections(), server.close(() => resolve()))) }
}

async function signIn(provider: Provider, accounts: Map<string, Account>, ...[request, response]: Parameters<Provider['interactionDetails']>) {
  const { prompt, params, session } = await provider.interactionDetails(request, response)
  if (prompt.name === 'login') {
    const account = accountIn(params.login_hint)
    accounts.set(account.sub, account)
    const result = account.sub === 'nobody' ? { error: 'access_denied' } : { login: { accountId: account.sub } }
    return await provider.interactionFinished(request, response, result, { mergeWithLastSubmission: false })
  }
  const grant = new provider.Grant({ accountId: session!.accountId, clientId: params.client_id! })
  grant.addOIDCScope('openid email profile')
  await provider.interactionFinished(request, response, { consent: { grantId: await grant.save() } }, { mergeWithLastSubmission: true })
}

const accountIn = (hint: string | undefined): Account => hint ? JSON.parse(Buffer.from(hint, 'base64url').toString()) : newAccount()
