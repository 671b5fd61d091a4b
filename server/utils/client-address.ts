import { BlockList, isIP } from 'node:net'
import { getHeader, type H3Event } from 'h3'
import { readSettings } from '../config'
import { countAgainstLimits, type LimitedAction } from '../services/rate-limits'

/**
 * Where a request comes from: the connection's address, or, behind trusted proxies, the nearest address in
 * X-Forwarded-For that is none of theirs. From anybody else that header counts for nothing.
 */
export function clientAddress(connection: string, forwardedFor: string | undefined, trustedProxies: string): string {
  const trusted = proxyList(trustedProxies)
  const chain = [...(forwardedFor?.split(',').map(a => a.trim()) ?? []), connection].map(plain).reverse()
  let nearest = chain[0]!
  for (const address of chain) {
    if (!isIP(address)) break
    nearest = address
    if (!trusted.check(address, isIP(address) === 6 ? 'ipv6' : 'ipv4')) break
  }
  return nearest
}

const plain = (address: string) => address.replace(/^::ffff:(?=\d+\.)/, '')

function proxyList(ranges: string): BlockList {
  const list = new BlockList()
  for (const range of ranges.split(/[\s,]+/).filter(Boolean)) {
    const [address, bits] = range.split('/') as [string, string | undefined]
    const family = isIP(address) === 6 ? 'ipv6' : 'ipv4'
    if (bits) list.addSubnet(address, Number(bits), family)
    else list.addAddress(address, family)
  }
  return list
}

/** Counts an attempt of somebody who is not signed in; throws `too_many_requests`. */
export async function countAttempt(event: H3Event, action: LimitedAction, account?: string): Promise<void> {
  const { RATE_LIMITS, TRUSTED_PROXIES } = readSettings()
  if (!RATE_LIMITS) return
  await countAgainstLimits(action, clientAddress(event.node.req.socket.remoteAddress ?? '', getHeader(event, 'x-forwarded-for'), TRUSTED_PROXIES), account)
}
