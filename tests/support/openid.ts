import { backAddress, type Account } from './openid-accounts'
import { Agent } from './studio'

/** The provider's answer for an account: the address that it sends the browser back to. `browser` keeps the provider's cookies. */
export async function atProvider(url: string, account: Account, changes: Record<string, string> = {}, browser = new Agent(new URL(url).origin)): Promise<string> {
  const address = new URL(url)
  for (const [name, value] of Object.entries({ login_hint: Buffer.from(JSON.stringify(account)).toString('base64url'), ...changes })) address.searchParams.set(name, value)
  let next = address
  for (let hops = 0; hops < 8; hops++) {
    const answer = await browser.fetch('GET', next.href)
    const location = answer.headers.get('location')
    if (!location) throw new Error(`The provider answered ${answer.status}: ${(await answer.text()).slice(0, 300)}`)
    next = new URL(location, next)
    if (backAddress.test(next.origin + next.pathname)) return next.href
  }
  throw new Error('The provider sends the browser round in circles.')
}

/** Begins a sign-in and goes through the provider; what our own page answers to that. */
export async function signInAt(agent: Agent, account: Account, { body = {}, changes, path = '/api/auth/openid/start' }: { body?: object, changes?: Record<string, string>, path?: string } = {}) {
  const begun = await agent.post(path, body)
  if (begun.status !== 200) throw new Error(`Beginning answered ${begun.status}: ${begun.text}`)
  const answer = await agent.get(await atProvider(begun.body.url, account, changes))
  return { status: answer.status, location: answer.headers.get('location') }
}
