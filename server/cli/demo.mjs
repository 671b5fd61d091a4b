import { randomBytes } from 'node:crypto'
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { keepInstallation } from './installation.mjs'
import { run, say } from './run.mjs'

/** Makes the invented demo studio once, with a password of this installation's own. Answers the owner's sign-in. */
export function ensureDemo(installation, programs, env) {
  const program = join(programs, 'demo.mjs')
  if (installation.demo || !existsSync(program)) return installation.demo
  say('Making the demo studio …')
  const demo = { email: 'owner@ropeworks.example', password: randomBytes(9).toString('base64url') }
  run(process.execPath, [program], { env: { ...env, DEMO_PASSWORD: demo.password } })
  keepInstallation({ ...installation, demo })
  return demo
}
