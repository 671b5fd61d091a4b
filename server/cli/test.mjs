import { execFile, spawnSync } from 'node:child_process'
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuilt } from './build.mjs'
import { ensurePackages } from './debian.mjs'
import { ensureDependencies } from './dependencies.mjs'
import { inData, root } from './paths.mjs'
import { findPrograms } from './postgres-programs.mjs'
import { main, run, say } from './run.mjs'

// `npm test`: whatever is missing, then lint, typecheck and all tests; the last line counts them.

/** Programs that are not ours and read our files back, real photographs, profiles, a browser. */
const debianPackages = ['chromium', 'fonts-dejavu-core', 'gdk-pixbuf-tests', 'golang-1.19-src', 'golang-golang-x-image-dev', 'icc-profiles-free', 'imagemagick', 'libheif-examples', 'libjxl-testdata', 'libvips-tools', 'poppler-utils', 'zbar-tools']
const projects = ['unit', 'component', 'integration', 'e2e']
const results = inData('test-results')
const bin = name => join(root, 'node_modules/.bin', name)

main(async () => {
  await ensureDependencies()
  ensurePackages([...findPrograms() ? [] : ['postgresql-15'], ...debianPackages])
  await ensureBuilt()
  run(bin('nuxt'), ['prepare'], { cwd: root })
  rmSync(results, { recursive: true, force: true })
  mkdirSync(results, { recursive: true })
  // Each of the two keeps one core busy.
  const counts = [...await Promise.all([step('eslint', '.'), step('vue-tsc', '-b', '--noEmit')]), ...projects.map(testProject)]
  const sum = key => counts.reduce((total, count) => total + count[key], 0)
  if (sum('skipped') > 0) say(`${sum('skipped')} skipped`)
  say(`${sum('passed')} passed, ${sum('failed')} failed`)
  if (sum('failed') > 0) process.exitCode = 1
})

/** A program that counts as one check; what it says is shown when it has ended. */
function step(name, ...args) {
  return new Promise((resolve) => {
    execFile(bin(name), args, { cwd: root, maxBuffer: 1e8 }, (error, stdout, stderr) => {
      say(`\n── ${name}\n${stdout}${stderr}`)
      resolve({ passed: error ? 0 : 1, failed: error ? 1 : 0, skipped: 0 })
    })
  })
}

/** One vitest project, counted from its report; a file that did not load, or a run that wrote no report, is a failure. */
function testProject(name) {
  say(`\n── ${name} tests`)
  const report = join(results, `${name}.json`)
  const { status } = spawnSync(bin('vitest'), ['run', '--project', name, '--reporter=default', '--reporter=json', `--outputFile.json=${report}`], { cwd: root, stdio: 'inherit' })
  if (!existsSync(report)) return { passed: 0, failed: 1, skipped: 0 }
  const { numPassedTests, numFailedTests, numPendingTests, testResults } = JSON.parse(readFileSync(report, 'utf8'))
  const notLoaded = testResults.filter(file => file.status === 'failed' && file.assertionResults.every(test => test.status !== 'failed')).length
  const failed = numFailedTests + notLoaded
  return { passed: numPassedTests, failed: failed === 0 && status !== 0 ? 1 : failed, skipped: numPendingTests }
}
