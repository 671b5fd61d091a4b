import { createHash } from 'node:crypto'
import { deflatedBands, joinChecksums, type RowCoder, streamHead, streamTail } from './bands'
import type { FilmRows } from './compose'
import { makeDither } from './dither'
import type { FilmFile } from './film-file'
import { subtractLeft } from './filter-rows'
import type { RasterSpec } from './tiff'

export interface PageSpec extends RasterSpec {
  pageMm: { width: number, height: number }
  title: string
  renderKey: string
}

/** 8-bit samples, dithered as the very last step, then filtered as in PNG. */
function pdfRows({ width, channels }: RasterSpec): RowCoder {
  const dither = makeDither(width, channels)
  const bytes = new Uint8Array(width * channels)
  return {
    bytesPerRow: 1 + bytes.length,
    encode(row, to, at) {
      dither(row, bytes)
      subtractLeft(bytes, channels, to, at)
    },
  }
}

/** Text as UTF-16 in hexadecimal (ISO 32000-1, 7.9.2.2). */
const textString = (text: string) => `<FEFF${Buffer.from(text, 'utf16le').swap16().toString('hex')}>`

/** The same key, the same date: it identifies the file and says nothing of a day. Within the 30 years from 2000. */
function dateOf(digest: Buffer): string {
  const seconds = digest.readUInt32BE(0) % (30 * 365 * 86_400)
  return `(D:${new Date(Date.UTC(2000, 0, 1) + 1000 * seconds).toISOString().replace(/[-:T]/g, '').slice(0, 14)}Z)`
}

const points = (mm: number) => (mm * 72 / 25.4).toFixed(5)

/** Objects of a PDF file in the order they are written; remembers where each begins (ISO 32000-1, 7.5.4). */
class PdfObjects {
  private readonly starts: number[] = []

  constructor(private readonly file: FilmFile) {}

  text(text: string) {
    this.file.write(Buffer.from(text, 'latin1'))
  }

  add(number: number, body: string) {
    this.open(number, `${body}\nendobj\n`)
  }

  open(number: number, head: string) {
    this.starts[number] = this.file.position
    this.text(`${number} 0 obj\n${head}`)
  }

  finish(root: number, info: number, id: string) {
    const at = this.file.position
    const lines = this.starts.slice(1).map(start => `${String(start).padStart(10, '0')} 00000 n \n`)
    this.text(`xref\n0 ${lines.length + 1}\n0000000000 65535 f \n${lines.join('')}`)
    this.text(`trailer\n<< /Size ${lines.length + 1} /Root ${root} 0 R /Info ${info} 0 R /ID [<${id}> <${id}>] >>\nstartxref\n${at}\n%%EOF\n`)
  }
}

/** PDF 1.7 (ISO 32000-1): one page of exactly the film's size, the picture over the whole of it, viewers told not to scale. */
export async function writePdf(file: FilmFile, rows: FilmRows, spec: PageSpec, onRows: (done: number) => void): Promise<void> {
  const digest = createHash('sha256').update(spec.renderKey).digest()
  const objects = new PdfObjects(file)
  const width = points(spec.pageMm.width), height = points(spec.pageMm.height)
  const box = `[0 0 ${width} ${height}]`
  const content = `q ${width} 0 0 ${height} 0 0 cm /Film Do Q`
  objects.text('%PDF-1.7\n%\xE2\xE3\xCF\xD3\n')
  objects.add(1, '<< /Type /Catalog /Pages 2 0 R /ViewerPreferences << /PrintScaling /None >> >>')
  objects.add(2, '<< /Type /Pages /Kids [3 0 R] /Count 1 >>')
  objects.add(3, `<< /Type /Page /Parent 2 0 R /MediaBox ${box} /CropBox ${box} /TrimBox ${box} /Resources << /XObject << /Film 5 0 R >> >> /Contents 4 0 R >>`)
  objects.add(4, `<< /Length ${content.length} >>\nstream\n${content}\nendstream`)
  objects.open(5, `<< /Type /XObject /Subtype /Image /Width ${spec.width} /Height ${spec.height} /BitsPerComponent 8`
    + ` /ColorSpace /${spec.channels === 1 ? 'DeviceGray' : 'DeviceRGB'} /Interpolate false /Filter /FlateDecode`
    + ` /DecodeParms << /Predictor 15 /Colors ${spec.channels} /BitsPerComponent 8 /Columns ${spec.width} >> /Length 6 0 R >>\nstream\n`)
  const start = file.position
  await writeStream(file, rows, spec, onRows)
  const length = file.position - start
  objects.text('\nendstream\nendobj\n')
  objects.add(6, String(length))
  objects.add(7, `<< /Title ${textString(spec.title)} /Producer (Emulside) /CreationDate ${dateOf(digest)} /ModDate ${dateOf(digest)} >>`)
  objects.finish(1, 7, digest.toString('hex', 0, 16))
}

async function writeStream(file: FilmFile, rows: FilmRows, spec: PageSpec, onRows: (done: number) => void): Promise<void> {
  let checksum = 1, done = 0
  file.write(streamHead)
  for await (const band of deflatedBands(rows, spec.height, pdfRows(spec), 'parts')) {
    file.write(band.deflated)
    checksum = joinChecksums(checksum, band.checksum, band.bytes)
    onRows(done += band.rows)
  }
  file.write(streamTail(checksum))
}
