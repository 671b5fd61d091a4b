import { mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import type { Measure, RunningService, SuiteContext } from './bench/suite'
import { suites } from './bench/suites'
import { startWeb, startWorker } from './service-processes'

// One JSON object a line for programs, then a table for people.

const { BENCH_FOLDER, DATABASE_URL, IMAGE_CHILD_PROGRAM, WEB_PROGRAM, WORKER_PROGRAM } = process.env as Record<string, string>
type Row = Measure & { suite: string }

async function startService(folder: string, env: Record<string, string> = {}): Promise<RunningService> {
  const storage = join(folder, 'storage')
  const environment = { ...process.env, STORAGE_DIR: storage, LOG_LEVEL: 'warn', ...env }
  const programs = { web: WEB_PROGRAM!, worker: WORKER_PROGRAM! }
  const web = await startWeb(programs, environment, folder)
  const worker = startWorker(programs, environment, folder)
  return {
    address: web.address, databaseUrl: DATABASE_URL!, storage, webPid: web.child.pid!, workerPid: worker.child.pid!,
    async stop() {
      await Promise.all([web.stop(), worker.stop()])
    },
  }
}

async function runSuite(suite: string): Promise<Row[]> {
  const folder = join(BENCH_FOLDER!, suite)
  mkdirSync(folder, { recursive: true })
  const context: SuiteContext = { imageChildProgram: IMAGE_CHILD_PROGRAM!, folder, startService: env => startService(folder, env) }
  const rows: Row[] = []
  try {
    const { run } = await suites[suite]!()
    for await (const measure of run(context)) {
      rows.push({ suite, ...measure })
      process.stdout.write(`${JSON.stringify({ suite, ...measure })}\n`)
    }
  }
  finally {
    rmSync(folder, { recursive: true, force: true })
  }
  return rows
}

const figure = (value: number | null) => value === null ? '–' : String(Number(value.toPrecision(4)))
const verdict = ({ ok }: Measure) => ok === null ? '' : ok ? 'yes' : 'NO'

function table(rows: Row[]): string {
  const cells = [['suite', 'what', 'value', 'unit', 'goal', 'reached', ''], ...rows.map(row => [row.suite, row.name, figure(row.value), row.unit, row.goal === null ? '' : `≤ ${figure(row.goal)}`, verdict(row), row.reason ?? ''])]
  const widths = cells[0]!.map((_, i) => Math.max(...cells.map(line => line[i]!.length)))
  return cells.map(line => line.map((cell, i) => cell.padEnd(widths[i]!)).join('  ').trimEnd()).join('\n')
}

async function main(): Promise<void> {
  const wanted = process.argv.slice(2)
  const unknown = wanted.filter(name => !(name in suites))
  if (unknown.length > 0) throw new Error(`There is no suite ${unknown.join(', ')}. There are: ${Object.keys(suites).join(', ')}.`)
  const rows: Row[] = []
  for (const suite of wanted.length > 0 ? wanted : Object.keys(suites)) rows.push(...await runSuite(suite))
  process.stdout.write(`\n${table(rows)}\n`)
}

main().catch((error: Error) => {
  process.stderr.write(`${error.stack}\n`)
  process.exitCode = 1
})
