import { describe, expect, it } from 'vitest'
import { settingsSchema } from '../../../server/config'

const base = { DATABASE_URL: 'postgres://localhost/none', STORAGE_DIR: 'x', NUXT_SESSION_PASSWORD: 'x'.repeat(32), IMAGE_CHILD_PROGRAM: 'x' }
const client = { OIDC_CLIENT_ID: 'emulside', OIDC_CLIENT_SECRET: 'secret' }
const wrongAmong = (settings: object) => settingsSchema.safeParse({ ...base, ...settings }).error?.issues.map(({ path }) => path.join('.')) ?? []

describe('the settings of an OpenID Connect provider', () => {
  it('are all three or none, and name what is missing', () => {
    expect(wrongAmong({})).toEqual([])
    expect(wrongAmong({ ...client, OIDC_ISSUER: 'https://sign-in.example' })).toEqual([])
    expect(wrongAmong({ OIDC_ISSUER: 'https://sign-in.example' })).toEqual(['OIDC_CLIENT_ID', 'OIDC_CLIENT_SECRET'])
    expect(wrongAmong(client)).toEqual(['OIDC_ISSUER'])
  })
  it('take an issuer without HTTPS on loopback only', () => {
    for (const OIDC_ISSUER of ['http://127.0.0.1:3190', 'http://localhost:3190', 'http://[::1]:3190']) expect(wrongAmong({ ...client, OIDC_ISSUER }), OIDC_ISSUER).toEqual([])
    for (const OIDC_ISSUER of ['http://sign-in.example', 'http://127.0.0.1.sign-in.example', 'ftp://127.0.0.1']) expect(wrongAmong({ ...client, OIDC_ISSUER }), OIDC_ISSUER).toContain('OIDC_ISSUER')
  })
})
