import { randomUUID } from 'node:crypto'

/** What the provider of tests says of somebody. */
export interface Account { sub: string, email?: string, email_verified?: boolean, name?: string }

export const openIdClient = { id: 'emulside', secret: 'only-for-tests' }
/** Where it sends browsers back to: applications of tests listen on free ports. */
export const backAddress = /^http:\/\/127\.0\.0\.1:\d+\/api\/auth\/openid\/back$/

export const openIdSettings = (issuer: string) => ({ OIDC_ISSUER: issuer, OIDC_CLIENT_ID: openIdClient.id, OIDC_CLIENT_SECRET: openIdClient.secret, OIDC_NAME: 'Weir House' })

export function newAccount(account: Partial<Account> = {}): Account {
  const sub = randomUUID()
  return { sub, email: `${sub}@ropeworks.example`, email_verified: true, name: 'Otto Lind', ...account }
}
