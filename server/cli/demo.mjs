import { randomBytes } from 'node:crypto'
import { join } from 'node:path'
import { keepInstallation } from './installation.mjs'
import { capture, say, Stop } from './run.mjs'

/**
 * Makes the invented demo studio once, with a password of this installation's own, unless people already work here.
 * Answers the sign-in. The password is kept first: a start that is killed half-way goes on with it.
 */
export function ensureDemo(installation, programs, env) {
  if (installation.demo?.ready || installation.demo === false) return installation.demo
  const demo = installation.demo ?? { email: 'owner@ropeworks.example', password: randomBytes(9).toString('base64url') }
  keepInstallation({ ...installation, demo })
  say('Making the demo studio …')
  const made = capture(process.execPath, ['--enable-source-maps', join(programs, 'demo.mjs')], { env: { ...env, REGISTRATION: 'open', DEMO_PASSWORD: demo.password } })
  if (!made.ok) throw new Stop(`The demo studio could not be made:\n${made.problem}`)
  return keepInstallation({ ...installation, demo: JSON.parse(made.text).made && { ...demo, ready: true } }).demo
}
