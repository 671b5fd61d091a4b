import { cpSync } from 'node:fs'
import { join } from 'node:path'
import { root } from './paths.mjs'

/** Programs beside the web server, each bundled to one file: name → source. */
const programs = {
  'worker': 'server/cli/worker.ts',
  'migrate': 'server/cli/migrate.ts',
  'demo': 'server/cli/demo.ts',
  'backup': 'server/cli/backup.ts',
  'restore': 'server/cli/restore.ts',
  'check-storage': 'server/cli/check-storage.ts',
  'bench': 'server/cli/bench.ts',
  'local-mailbox': 'server/cli/local-mailbox.ts',
  'image-child': 'server/image/child.ts',
}

/** Bundles of the sources as they are, for `npm run dev`, backup and restore. */
export const developmentBundles = join(root, '.output/development')

function settingsFor(folder) {
  return {
    absWorkingDir: root,
    entryPoints: programs,
    outdir: folder,
    outExtension: { '.js': '.mjs' },
    bundle: true, platform: 'node', target: 'node20', format: 'esm', packages: 'external', sourcemap: 'linked', logLevel: 'warning',
    alias: { '#shared': join(root, 'shared') },
  }
}

const copyMigrations = folder => cpSync(join(root, 'server/db/migrations'), join(folder, 'migrations'), { recursive: true })

/** Bundles all programs into a folder, with the migrations beside them. */
export async function bundlePrograms(folder) {
  const { build } = await import('esbuild')
  await build(settingsFor(folder))
  copyMigrations(folder)
}

/** Bundles, and again whenever a source changes; `onRebuilt` is called after each later success. */
export async function watchPrograms(folder, onRebuilt) {
  const { context } = await import('esbuild')
  let first = true
  const plugin = {
    name: 'tell',
    setup: build => build.onEnd(({ errors }) => {
      if (errors.length > 0) return
      copyMigrations(folder)
      if (!first) onRebuilt()
      first = false
    }),
  }
  const watching = await context({ ...settingsFor(folder), plugins: [plugin] })
  await watching.rebuild()
  await watching.watch()
  return { stop: () => watching.dispose() }
}
