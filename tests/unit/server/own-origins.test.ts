import { describe, expect, it } from 'vitest'
import { readSettings } from '../../../server/config'
import { ownOrigins } from '../../../server/utils/foreign-origin'

const settings = readSettings({ DATABASE_URL: 'postgres://x@127.0.0.1/x', STORAGE_DIR: '/tmp', NUXT_SESSION_PASSWORD: 'x'.repeat(32), IMAGE_CHILD_PROGRAM: 'x' })

describe('our own origin', () => {
  it('is the configured address alone, without its path', () => {
    expect([...ownOrigins({ ...settings, NUXT_PUBLIC_URL: 'https://prints.example/studio' })]).toEqual(['https://prints.example'])
  })
  it('is loopback at our port where none is configured', () => {
    const origins = ownOrigins({ ...settings, NUXT_PUBLIC_URL: undefined, HOST: '0.0.0.0', PORT: 3000 })
    expect([...origins]).toEqual(['http://127.0.0.1:3000', 'http://localhost:3000', 'http://[::1]:3000'])
  })
  it('includes the one address that is listened on', () => {
    expect(ownOrigins({ ...settings, NUXT_PUBLIC_URL: undefined, HOST: '192.0.2.7', PORT: 80 })).toContain('http://192.0.2.7')
    expect(ownOrigins({ ...settings, NUXT_PUBLIC_URL: undefined, HOST: '2001:db8::1', PORT: 3000 })).toContain('http://[2001:db8::1]:3000')
  })
})
