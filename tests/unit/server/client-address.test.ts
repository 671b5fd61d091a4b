import { describe, expect, it } from 'vitest'
import { clientAddress } from '../../../server/utils/client-address'

// Addresses are RFC 5737's and RFC 3849's, for documentation.
describe('the address a request comes from', () => {
  it('is the connection’s own when no proxy is trusted, whatever a header says', () => {
    expect(clientAddress('203.0.113.9', '198.51.100.1', '')).toBe('203.0.113.9')
  })
  it('is the nearest in the header that is no trusted proxy', () => {
    expect(clientAddress('10.0.0.1', '198.51.100.1', '10.0.0.0/8')).toBe('198.51.100.1')
    expect(clientAddress('10.0.0.1', '192.0.2.66, 198.51.100.1, 10.1.2.3', '10.0.0.0/8')).toBe('198.51.100.1')
  })
  it('is read from the right, so that nobody can put another in front', () => {
    expect(clientAddress('10.0.0.1', '192.0.2.66, 198.51.100.1', '10.0.0.1')).toBe('198.51.100.1')
  })
  it('stays with the proxy where the header holds no address', () => {
    expect(clientAddress('10.0.0.1', 'unknown', '10.0.0.1')).toBe('10.0.0.1')
    expect(clientAddress('10.0.0.1', undefined, '10.0.0.1')).toBe('10.0.0.1')
  })
  it('takes IPv4 written as IPv6 for what it is, and IPv6 ranges', () => {
    expect(clientAddress('::ffff:10.0.0.1', '198.51.100.1', '10.0.0.1')).toBe('198.51.100.1')
    expect(clientAddress('2001:db8::1', '2001:db8:ffff::7', '2001:db8::/64')).toBe('2001:db8:ffff::7')
  })
})
