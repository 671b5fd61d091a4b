import { createHash } from 'node:crypto'
import { closeSync, existsSync, mkdirSync, openSync, readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { bundlePrograms } from './bundles.mjs'
import { builtPrograms, inData, root } from './paths.mjs'
import { runAside, say, Stop } from './run.mjs'

const sources = [
  'app.vue', 'error.vue', 'nuxt.config.ts', 'tailwind.config.ts', 'package-lock.json',
  'assets', 'components', 'composables', 'layouts', 'middleware', 'pages', 'plugins', 'public', 'server', 'shared', 'stores',
]
const logPath = () => {
  mkdirSync(inData('logs'), { recursive: true })
  return inData('logs', 'build.log')
}
const marker = join(builtPrograms, 'built-from')

/** One hash over the names and contents of everything that goes into the build. */
export function hashOfSources() {
  const hash = createHash('sha256').update(process.version)
  const add = (path) => {
    hash.update(`\0${path}\0`).update(readFileSync(join(root, path)))
  }
  const walk = path => readdirSync(join(root, path), { withFileTypes: true })
    .sort((a, b) => a.name < b.name ? -1 : 1)
    .forEach(entry => entry.isDirectory() ? walk(`${path}/${entry.name}`) : add(`${path}/${entry.name}`))
  for (const path of sources) {
    if (!existsSync(join(root, path))) continue
    if (/\.[a-z]+$/.test(path)) add(path)
    else walk(path)
  }
  return hash.digest('hex')
}

/** Builds the service unless it was built from these very sources. Answers the hash. */
export async function ensureBuilt() {
  const hash = hashOfSources()
  if (existsSync(marker) && readFileSync(marker, 'utf8') === hash) return hash
  say('Building, which takes a minute or two …')
  const log = openSync(logPath(), 'w')
  await runAside(process.execPath, [join(root, 'node_modules/nuxt/bin/nuxt.mjs'), 'build'], { cwd: root, env: { ...process.env, NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1' }, stdio: ['ignore', log, log] })
    .catch((problem) => {
      throw new Stop(`${readFileSync(logPath(), 'utf8').slice(-3000)}\n${problem.message}`)
    })
    .finally(() => closeSync(log))
  await bundlePrograms(builtPrograms)
  writeFileSync(marker, hash)
  return hash
}
