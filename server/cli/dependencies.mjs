import { createHash } from 'node:crypto'
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { root } from './paths.mjs'
import { run, say } from './run.mjs'

const marker = join(root, 'node_modules/.installed-from')

/** Installs npm packages when the lock file is another than the one they were installed from. */
export function ensureDependencies() {
  const lock = createHash('sha256').update(readFileSync(join(root, 'package-lock.json'))).digest('hex')
  if (existsSync(marker) && readFileSync(marker, 'utf8') === lock) return
  say('Installing npm packages …')
  run('npm', ['ci', '--no-audit', '--no-fund'], { cwd: root })
  writeFileSync(marker, lock)
}
