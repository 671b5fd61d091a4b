import { request as httpRequest } from 'node:http'
import { fingerprintOf, fingerprintSlices } from '../../shared/uploads/fingerprint'

/** Somebody who is signed in at the service: an Agent, or a client of the bench. */
export interface Sender { address: string, cookieHeader: () => string }
export interface TusAnswer { status: number, headers: Record<string, string | string[] | undefined>, text: string }
interface Call { method: string, headers?: Record<string, string | number>, bytes?: Uint8Array, /** cuts the connection when so many bytes have left */ cutAfter?: number }

/** The resumable protocol by plain requests, so that tests say themselves where a connection breaks. */
export function callTus(sender: Sender, path: string, { method, headers = {}, bytes, cutAfter }: Call): Promise<TusAnswer> {
  return new Promise((resolve, reject) => {
    const request = httpRequest(new URL(path, sender.address), {
      method, agent: false, headers: { 'tus-resumable': '1.0.0', 'cookie': sender.cookieHeader(), ...bytes ? { 'content-length': bytes.length, 'content-type': 'application/offset+octet-stream' } : {}, ...headers },
    })
    request.on('error', reject)
    request.on('response', (response) => {
      let text = ''
      response.setEncoding('utf8').on('data', piece => text += piece).on('error', reject)
        .on('end', () => resolve({ status: response.statusCode!, headers: response.headers, text }))
    })
    if (cutAfter === undefined) request.end(bytes)
    else request.write(bytes!.subarray(0, cutAfter), () => setTimeout(() => request.destroy(new Error('cut on purpose')), 5))
  })
}

export const fingerprintOfBytes = (bytes: Uint8Array) => fingerprintOf(fingerprintSlices(bytes.length).map(({ start, end }) => bytes.subarray(start, end)))

const encoded = (pairs: Record<string, string>) => Object.entries(pairs).map(([key, value]) => `${key} ${Buffer.from(value).toString('base64')}`).join(',')

/** Begins an upload; answers its path. */
export async function beginUpload(sender: Sender, root: string, bytes: Uint8Array, fileName = 'weir.png'): Promise<string> {
  const metadata = encoded({ filename: fileName, lastModified: '1760000000000', fingerprint: fingerprintOfBytes(bytes) })
  const answer = await callTus(sender, `${root}/uploads`, { method: 'POST', headers: { 'upload-length': bytes.length, 'upload-metadata': metadata } })
  if (answer.status !== 201) throw new Error(`Beginning an upload answered ${answer.status}: ${answer.text}`)
  return answer.headers.location as string
}

export const sendFrom = (sender: Sender, path: string, offset: number, bytes: Uint8Array, cutAfter?: number) =>
  callTus(sender, path, { method: 'PATCH', headers: { 'upload-offset': offset }, bytes: bytes.subarray(offset), cutAfter })

export async function offsetOf(sender: Sender, path: string): Promise<number> {
  const answer = await callTus(sender, path, { method: 'HEAD' })
  if (answer.status !== 200) throw new Error(`Asking for the offset answered ${answer.status}.`)
  return Number(answer.headers['upload-offset'])
}
