import { readSettings } from '../config'
import { runWorker } from '../jobs/worker'

// The worker process: takes up waiting renders until it is told to stop.

const worker = await runWorker(readSettings())
let stopping = false
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, async () => {
    if (stopping) return
    stopping = true
    await worker.stop()
    process.exit(0)
  })
}
