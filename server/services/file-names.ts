import type { FilmFormat } from '#shared/schemas/negatives'
import { limits } from '#shared/schemas/limits'
import { pictureEndings } from '#shared/schemas/picture-formats'
import type { NegativeParts } from './negative-parts'
import type { WedgeParts } from './wedge-parts'

const pictureEnding = new RegExp(`\\.(?:${Object.values(pictureEndings).flat().join('|')})$`, 'i')
// Control characters, and those that turn or hide what follows them.
const hidden = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}\p{Co}\p{Cn}]/gu

/** A name from a file name: without folders, ending and hidden characters, at most as long as the table takes. */
export function nameFromFileName(fileName: string, fallback = 'Photo'): string {
  const last = fileName.split(/[/\\]/).at(-1) ?? ''
  const clean = last.normalize('NFC').replace(/\s+/g, ' ').replace(hidden, '').trim().replace(pictureEnding, '').trim()
  return bounded(clean) || fallback
}

/** As a name on somebody's disk: no character that a file system or a shell takes amiss. */
export function fileNameFrom(name: string, ending: string): string {
  const safe = name.replace(/\s+/g, ' ').replace(hidden, '').replace(/[<>:"/\\|?*]/g, '-').replace(/^[.\s]+|[.\s]+$/g, '')
  return `${bounded(safe) || 'file'}.${ending}`
}

/** Says what lies on a disk full of films: picture, bench, size and resolution. */
export function filmFileName({ negative, bench }: Pick<NegativeParts, 'negative' | 'bench'>, format: FilmFormat): string {
  const { size, pixelsPerInch } = negative.settings
  const facts = `${size.widthMm} x ${size.heightMm} mm, ${pixelsPerInch} ppi`
  return fileNameFrom(`${negative.name.slice(0, 45)} - ${bench.name.slice(0, 30)} - ${facts}`, format)
}

/** The same for a wedge; `title` names it and its code. */
export function wedgeFileName({ wedge, bench }: Pick<WedgeParts, 'wedge' | 'bench'>, title: string, format: FilmFormat): string {
  return fileNameFrom(`${title} - ${bench.name.slice(0, 30)} - ${wedge.widthMm} x ${wedge.heightMm} mm, ${wedge.pixelsPerInch} ppi`, format)
}

/** Cut by whole characters: half a surrogate pair is no text. */
function bounded(text: string): string {
  let cut = text.slice(0, limits.nameLength)
  if (/[\uD800-\uDBFF]$/.test(cut)) cut = cut.slice(0, -1)
  return cut.trim()
}
