import { readFile } from 'node:fs/promises'
import { createRequire } from 'node:module'
import { prepareZXingModule, readBarcodes, type ReaderOptions } from 'zxing-wasm/reader'
import { parseIdentity } from '#shared/calibration/wedge/identity-code'

/** A grey picture to look for a code in, 8 bits a pixel. */
export interface GreyPlane { width: number, height: number, values: Uint8Array | Uint8ClampedArray }

let prepared: Promise<unknown> | undefined

/** The reader is handed its WebAssembly from disk: by itself it would fetch it from the network. */
function prepare(): Promise<unknown> {
  return prepared ??= (async () => {
    const bytes = await readFile(createRequire(import.meta.url).resolve('zxing-wasm/reader/zxing_reader.wasm'))
    const wasmBinary = bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength)
    return prepareZXingModule({ overrides: { wasmBinary }, fireImmediately: true })
  })()
}

const options: ReaderOptions = { formats: ['QRCode'], tryHarder: true, tryRotate: true, tryInvert: true, tryDownscale: true, maxNumberOfSymbols: 8 }

/** Identities of ours among the QR codes (ISO/IEC 18004) in a picture, any way round, mirrored or inverted. */
export async function readIdentities({ width, height, values }: GreyPlane, binarizer: ReaderOptions['binarizer'] = 'LocalAverage'): Promise<string[]> {
  await prepare()
  const data = new Uint8ClampedArray(4 * width * height)
  for (let i = 0, at = 0; i < values.length; i++, at += 4) data[at] = data[at + 1] = data[at + 2] = values[i]!
  const found = await readBarcodes({ data, width, height, colorSpace: 'srgb' } as ImageData, { ...options, binarizer })
  return [...new Set(found.flatMap(({ text }) => parseIdentity(text) ?? []))]
}
