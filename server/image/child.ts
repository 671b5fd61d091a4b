import { setImmediate } from 'node:timers/promises'
import { ComputeError } from '#shared/errors'
import type { ImageReply } from './pool'
import type { ImageCalls } from './protocol'
import { calibrate } from './work/calibrate'
import { makeFilm } from './work/film'
import { fitCurve } from './work/fit'
import { makeForecast } from './work/forecast'
import { probePicture } from './work/probe'
import { makeProxy } from './work/proxy'
import { identifyScan, makeScanPicture, readScan } from './work/scan'
import { makeThumbnail } from './work/thumbnail'
import { makeWedgeFilm } from './work/wedge-film'
import { makeWedgePreview } from './work/wedge-preview'

type Work = { [K in keyof ImageCalls]: (input: ImageCalls[K]['in'], onProgress: (fraction: number) => void) => Promise<ImageCalls[K]['out']> }

const work: Work = {
  probe: probePicture, thumbnail: makeThumbnail, proxy: makeProxy, film: makeFilm, wedgeFilm: makeWedgeFilm, wedgePreview: makeWedgePreview, forecast: makeForecast, fitCurve,
  identifyScan, readScan, scanPicture: makeScanPicture, ...calibrate,
}

/** The parent hears of progress about ten times a second at most. */
const progressEveryMs = 100

function reply(message: ImageReply): void {
  process.send?.(message)
}

/** Decoded pictures lie outside the engine's own heap; the next job must not find the last one's still there. */
async function releasePictures(): Promise<void> {
  globalThis.gc?.()
  await setImmediate()
}

async function run(id: number, name: keyof ImageCalls, input: never): Promise<void> {
  let reportedAt = 0
  const onProgress = (fraction: number) => {
    const now = performance.now()
    if (now - reportedAt < progressEveryMs) return
    reportedAt = now
    reply({ id, kind: 'progress', fraction })
  }
  try {
    reply({ id, kind: 'done', result: await work[name](input, onProgress) })
  }
  catch (error) {
    const { code, message, issues } = asRefusal(name, error)
    reply({ id, kind: 'failed', code, message, issues })
  }
}

/** What a person may read. The system's own words hold paths: they go to the log. */
function asRefusal(name: string, error: unknown): ComputeError {
  if (error instanceof ComputeError) return error
  console.error(JSON.stringify({ level: 'error', message: 'picture work failed', call: name, reason: error instanceof Error ? error.stack : String(error) }))
  if ((error as NodeJS.ErrnoException).code === 'ENOSPC') return new ComputeError('disk_full', 'The service’s disk is full. Ask whoever runs it to make room, then try again.')
  return new ComputeError('image_child_failed', 'The picture could not be worked on. Try again; if it happens again, try a smaller picture or film.')
}

process.on('message', ({ id, name, input }: { id: number, name: keyof ImageCalls, input: never }) => void run(id, name, input).then(releasePictures))
// Ctrl-C in a terminal reaches this process too; the parent decides when work ends, and its end is this program's end.
process.on('SIGINT', () => {})
process.on('disconnect', () => process.exit(0))
