import { randomBytes } from 'node:crypto'
import { join } from 'node:path'
import { keepInstallation } from './installation.mjs'
import { root } from './paths.mjs'
import { capture, say, Stop } from './run.mjs'

/**
 * Makes the invented demo studio once, with a password of this installation's own, unless people already work here.
 * Answers the sign-in; false once the studio was removed: it does not come back by itself. The password is kept first, and
 * that all is there last: after a start that was killed in between, the next one begins the studio anew.
 */
export function ensureDemo({ installation, programs, env, database }) {
  if (installation.demo?.ready && database.sql('emulside', 'select count(*) from studios where is_demo') === '0') return keepInstallation({ ...installation, demo: false }).demo
  if (installation.demo?.ready || installation.demo === false) return installation.demo
  const demo = installation.demo ?? { email: 'owner@ropeworks.example', password: randomBytes(9).toString('base64url') }
  keepInstallation({ ...installation, demo })
  say('Making the demo studio …')
  const settings = { DEMO_PASSWORD: demo.password, DEMO_PHOTOS: join(root, 'server/cli/demo/photos') }
  const made = capture(process.execPath, ['--enable-source-maps', join(programs, 'demo.mjs')], { env: { ...env, ...settings } })
  if (!made.ok) throw new Stop(`The demo studio could not be made:\n${made.problem}`)
  return keepInstallation({ ...installation, demo: JSON.parse(made.text).made && { ...demo, ready: true } }).demo
}
