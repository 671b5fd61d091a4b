import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { root } from './paths.mjs'
import { runAside, say } from './run.mjs'

const packagesOf = path => existsSync(path) ? JSON.parse(readFileSync(path, 'utf8')).packages : {}

/** Installs npm packages unless what npm says it installed is what the lock file asks for. */
export async function ensureDependencies() {
  const wanted = packagesOf(join(root, 'package-lock.json'))
  const installed = packagesOf(join(root, 'node_modules/.package-lock.json'))
  const differs = Object.entries(wanted).some(([path, { version, optional }]) =>
    path !== '' && installed[path]?.version !== version && !(optional && !installed[path]))
  if (!differs) return
  say('Installing npm packages …')
  await runAside('npm', ['ci', '--no-audit', '--no-fund'], { cwd: root })
}
