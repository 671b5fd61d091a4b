import { describe, expect, it } from 'vitest'
import { contentDisposition, readRange } from '../../../server/utils/send-file'

// Expected values: RFC 9110, clause 14.1.2 and its examples, for a file of 10 000 bytes.
describe('byte ranges', () => {
  it.each([
    ['bytes=0-499', { start: 0, end: 499 }],
    ['bytes=500-999', { start: 500, end: 999 }],
    ['bytes=-500', { start: 9500, end: 9999 }],
    ['bytes=9500-', { start: 9500, end: 9999 }],
    ['bytes=9500-20000', { start: 9500, end: 9999 }],
    ['bytes=-20000', { start: 0, end: 9999 }],
    ['bytes=10000-', 'beyond'],
    ['bytes=-0', 'beyond'],
    ['bytes=5-2', 'whole'],
    ['bytes=0-1,5-6', 'whole'],
    ['pages=1-2', 'whole'],
    [undefined, 'whole'],
  ])('%s', (header, range) => expect(readRange(header, 10_000)).toEqual(range))
})

// Expected form: RFC 6266, clause 5, with RFC 8187's extended value.
it('offers a plain and a full file name', () => {
  expect(contentDisposition('Brücke "2".pdf')).toBe('attachment; filename="Brucke _2_.pdf"; filename*=UTF-8\'\'Br%C3%BCcke%20%222%22.pdf')
})
