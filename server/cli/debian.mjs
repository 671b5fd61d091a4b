import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { capture, run, say, Stop } from './run.mjs'

const installed = name => capture('dpkg-query', ['-W', '-f=${Status}', name]).text.includes('install ok installed')

/** Installs the Debian packages that are missing, as root or through `sudo -n`; otherwise names the one command to run. */
export function ensurePackages(names) {
  const missing = names.filter(name => !installed(name))
  if (missing.length === 0) return
  const command = `apt-get install --yes --no-install-recommends ${missing.join(' ')}`
  const prefix = rootPrefix()
  if (!prefix || !existsSync('/usr/bin/apt-get')) {
    throw new Stop(`These programs are missing: ${missing.join(', ')}. Run this once, then start again:\n\n  sudo ${command}\n`)
  }
  say(`Installing ${missing.join(', ')} …`)
  if (missing.some(name => /^postgresql-\d+$/.test(name))) keepMainClusterAway(prefix)
  const environment = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  const asRoot = words => run(...split([...prefix, 'env', 'DEBIAN_FRONTEND=noninteractive', ...words]), { env: environment, stdio: ['ignore', 'ignore', 'inherit'] })
  try {
    asRoot(command.split(' '))
  }
  catch {
    asRoot(['apt-get', 'update'])
    asRoot(command.split(' '))
  }
}

function rootPrefix() {
  if (process.getuid?.() === 0) return []
  return capture('sudo', ['-n', 'true']).ok ? ['sudo', '-n'] : undefined
}

/** Debian would start a cluster of its own on the usual port; we want the programs only. */
function keepMainClusterAway(prefix) {
  const path = '/etc/postgresql-common/createcluster.conf'
  const line = 'create_main_cluster = false\n'
  const text = existsSync(path) ? readFileSync(path, 'utf8') : ''
  if (/^\s*create_main_cluster\s*=\s*false/m.test(text)) return
  if (prefix.length === 0) {
    mkdirSync('/etc/postgresql-common', { recursive: true })
    writeFileSync(path, text + line)
    return
  }
  run(...split([...prefix, 'mkdir', '-p', '/etc/postgresql-common']))
  run(...split([...prefix, 'tee', '-a', path]), { input: line, stdio: ['pipe', 'ignore', 'inherit'] })
}

const split = words => [words[0], words.slice(1)]
