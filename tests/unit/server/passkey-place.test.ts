import { describe, expect, it } from 'vitest'
import { settingsSchema } from '../../../server/config'
import { passkeyPlace } from '../../../server/services/passkey-place'

const settings = settingsSchema.parse({ DATABASE_URL: 'postgres://localhost/none', STORAGE_DIR: 'x', NUXT_SESSION_PASSWORD: 'x'.repeat(32), IMAGE_CHILD_PROGRAM: 'x' })
const at = (NUXT_PUBLIC_URL: string | undefined, HOST = '127.0.0.1') => passkeyPlace({ ...settings, NUXT_PUBLIC_URL, HOST })

describe('passkeys work', () => {
  it('under a name by HTTPS, and at localhost without it', () => {
    expect(at('https://prints.example:8443/studio')).toEqual({ origin: 'https://prints.example:8443', rpId: 'prints.example' })
    expect(at('http://localhost:3180')).toEqual({ origin: 'http://localhost:3180', rpId: 'localhost' })
  })
  it('at localhost where no address is configured and the service listens there', () => {
    expect(at(undefined)).toEqual({ origin: 'http://localhost:3000', rpId: 'localhost' })
    expect(at(undefined, '0.0.0.0')?.rpId).toBe('localhost')
    expect(at(undefined, '192.0.2.7')).toBeNull()
  })
  it('nowhere else: not under an address of figures, nor without HTTPS', () => {
    for (const address of ['http://127.0.0.1:3000', 'https://192.0.2.7', 'https://[2001:db8::1]:3000', 'http://prints.example', 'http://localhost.prints.example']) expect(at(address), address).toBeNull()
  })
})
