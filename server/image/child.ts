import { setImmediate } from 'node:timers/promises'
import { ComputeError } from '#shared/errors'
import type { ImageReply } from './pool'
import type { ImageCalls } from './protocol'
import { makeFilm } from './work/film'
import { fitCurve } from './work/fit'
import { makeForecast } from './work/forecast'
import { probePicture } from './work/probe'
import { makeProxy } from './work/proxy'
import { makeThumbnail } from './work/thumbnail'

type Work = { [K in keyof ImageCalls]: (input: ImageCalls[K]['in'], onProgress: (fraction: number) => void) => Promise<ImageCalls[K]['out']> }

const work: Work = { probe: probePicture, thumbnail: makeThumbnail, proxy: makeProxy, film: makeFilm, forecast: makeForecast, fitResponse: fitCurve }

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
    if (error instanceof ComputeError) return reply({ id, kind: 'failed', code: error.code, message: error.message, issues: error.issues })
    const reason = error instanceof Error ? error.message : String(error)
    reply({ id, kind: 'failed', code: 'image_child_failed', message: `The picture could not be worked on: ${reason}. Try again; if it happens again, try a smaller picture or film.` })
  }
}

process.on('message', ({ id, name, input }: { id: number, name: keyof ImageCalls, input: never }) => void run(id, name, input).then(releasePictures))
// The parent's end is this program's end.
process.on('disconnect', () => process.exit(0))
