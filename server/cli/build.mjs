import { createHash } from 'node:crypto'
import { closeSync, existsSync, mkdirSync, openSync, readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { bundlePrograms } from './bundles.mjs'
import { builtPrograms, inData, root } from './paths.mjs'
import { runAside, say, Stop } from './run.mjs'

const sources = [
  'app.vue', 'error.vue', 'nuxt.config.ts', 'tailwind.config.ts', 'package-lock.json',
  'assets', 'components', 'composables', 'layouts', 'middleware', 'modules', 'pages', 'plugins', 'public', 'server', 'shared', 'stores', 'utils',
]
const marker = join(builtPrograms, 'built-from.json')

/** One hash over the names and contents of sources; `leaveOut` is a folder that doesn't count. */
function hashOf(paths, leaveOut) {
  const hash = createHash('sha256').update(process.version)
  const add = path => hash.update(`\0${path}\0`).update(readFileSync(join(root, path)))
  const walk = (path) => {
    if (path === leaveOut) return
    const entries = readdirSync(join(root, path), { withFileTypes: true }).sort((a, b) => a.name < b.name ? -1 : 1)
    for (const entry of entries) (entry.isDirectory() ? walk : add)(`${path}/${entry.name}`)
  }
  for (const path of paths.filter(path => existsSync(join(root, path)))) (/\.[a-z]+$/.test(path) ? add : walk)(path)
  return hash.digest('hex')
}

/** Builds web, and the programs beside it, unless they were built from these very sources. Answers the whole's hash. */
export async function ensureBuilt() {
  const wanted = { web: hashOf(sources, 'server/cli'), all: hashOf(sources) }
  const built = existsSync(marker) ? JSON.parse(readFileSync(marker, 'utf8')) : {}
  if (built.web !== wanted.web) await buildWeb()
  if (built.all !== wanted.all) {
    await bundlePrograms(builtPrograms)
    writeFileSync(marker, JSON.stringify(wanted))
  }
  return wanted.all
}

async function buildWeb() {
  say('Building, which takes a minute or two …')
  mkdirSync(inData('logs'), { recursive: true })
  const path = inData('logs', 'build.log')
  const log = openSync(path, 'w')
  const env = { ...process.env, NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1' }
  try {
    await runAside(process.execPath, [join(root, 'node_modules/nuxt/bin/nuxt.mjs'), 'build'], { cwd: root, env, stdio: ['ignore', log, log] })
  }
  catch (problem) {
    throw new Stop(`${readFileSync(path, 'utf8').slice(-3000)}\n${problem.message}`)
  }
  finally {
    closeSync(log)
  }
}
