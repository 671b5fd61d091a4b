export interface ReadingFile { type: 'application/json' | 'text/csv' | 'text/plain', text: string }

/** What kind of table a file holds, by its first characters: names lie more often than contents. */
export function readingFileOf(text: string): ReadingFile {
  const start = text.replace(/^\uFEFF/, '').trimStart()
  if (start.startsWith('{') || start.startsWith('[')) return { type: 'application/json', text: start }
  const isCgats = /^(?:CGATS|IT8|BEGIN_DATA|NUMBER_OF_)/im.test(start)
  return { type: isCgats ? 'text/plain' : 'text/csv', text: start }
}
