import { rmSync } from 'node:fs'
import type { FilmFormat } from '#shared/schemas/negatives'
import type { FilmRows } from './compose'
import { FilmFile } from './film-file'
import { type PageSpec, writePdf } from './pdf'
import { writePng } from './png'
import { writeTiff } from './tiff'

/** Writes a film's rows as the file that is asked for; nothing stays of one that fails. `onRows` hears how many are done. */
export async function writeFilm(target: string, format: FilmFormat, rows: FilmRows, spec: PageSpec, onRows: (done: number) => void): Promise<{ bytes: number, sha256: string }> {
  const file = new FilmFile(target)
  try {
    if (format === 'tiff') await writeTiff(file, rows, spec, onRows)
    else if (format === 'png') await writePng(file, rows, spec, onRows)
    else await writePdf(file, rows, spec, onRows)
  }
  catch (error) {
    rmSync(target, { force: true })
    throw error
  }
  finally {
    file.close()
  }
  return { bytes: file.position, sha256: FilmFile.sha256(target) }
}
