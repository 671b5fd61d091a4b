import { readSettings } from '../config'
import { closeDatabase } from '../db/client'
import { runWorker } from '../jobs/worker'
import { log, takeOverConsole } from '../log'

process.env.PROCESS_NAME = 'worker'

// The worker process: takes up waiting renders until it is told to stop.

async function main(): Promise<void> {
  takeOverConsole()
  const worker = await runWorker(readSettings(), (event, details) => log('info', event, details))
  log('info', 'worker.started')
  let stopping = false
  const stop = async () => {
    if (stopping) return
    stopping = true
    await worker.stop()
    await closeDatabase()
    log('info', 'worker.stopped')
    process.exit(0)
  }
  process.on('SIGTERM', stop)
  process.on('SIGINT', stop)
}

main().catch((error) => {
  process.stderr.write(`${error.message}\n`)
  process.exit(1)
})
