import { createHash, randomBytes } from 'node:crypto'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { createServer, request as httpRequest, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { H3Event } from 'h3'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { ComputeError } from '#shared/errors'
import type { Arrival } from '../../../server/services/photo-intake'
import { openStorage } from '../../../server/storage'
import { receiveFiles } from '../../../server/utils/receive-files'

const folder = mkdtempSync(join(tmpdir(), 'receive-'))
const storage = openStorage(folder)
let server: Server
let address: string
let outcome: Promise<Arrival[]>
let room = Infinity

beforeAll(async () => {
  server = createServer(async (req, res) => {
    outcome = receiveFiles({ node: { req, res } } as unknown as H3Event, {
      field: 'file', maxFiles: 3, maxFileBytes: 500_000, newId: () => 'id', openTemporary: id => storage.temporary(id),
      takeRoom: (bytes) => { if ((room -= bytes) < 0) throw new ComputeError('studio_full', 'Full.') },
    })
    await outcome.catch(() => {})
    res.end()
  })
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  address = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
})
afterAll(() => {
  server.close()
  rmSync(folder, { recursive: true, force: true })
})
beforeEach(() => { room = Infinity })

const temporaryFiles = () => storage.list('temporary')
const send = async (form: FormData) => {
  await fetch(address, { method: 'POST', body: form })
  return outcome
}
function formOf(...files: [field: string, name: string, bytes: Uint8Array<ArrayBuffer>][]) {
  const form = new FormData()
  for (const [field, name, bytes] of files) form.append(field, new Blob([bytes]), name)
  return form
}
const noise = (bytes: number) => new Uint8Array(randomBytes(bytes))

describe('receiving files', () => {
  it('writes each file whole and hashes it on the way', async () => {
    const [a, b] = [noise(300_000), noise(17)]
    const received = await send(formOf(['file', 'a.jpg', a], ['file', 'Brücke.png', b]))
    expect(received.map(({ fileName, bytes, sha256 }) => ({ fileName, bytes, sha256 }))).toEqual([
      { fileName: 'a.jpg', bytes: 300_000, sha256: createHash('sha256').update(a).digest('hex') },
      { fileName: 'Brücke.png', bytes: 17, sha256: createHash('sha256').update(b).digest('hex') },
    ])
    expect(readFileSync(received[0]!.file!.path).equals(a)).toBe(true)
    for (const { file } of received) await file!.discard()
  })

  it('refuses one file for its size, its emptiness or its field’s name, and takes the next', async () => {
    const received = await send(formOf(['file', 'large.jpg', noise(500_001)], ['file', 'empty.jpg', noise(0)], ['picture', 'b.jpg', noise(5)]))
    expect(received.map(r => r.refusal?.code)).toEqual(['file_too_large', 'not_an_image', 'invalid_input'])
    const [good] = (await send(formOf(['picture', 'b.jpg', noise(500)], ['file', 'good.jpg', noise(500)]))).filter(r => !r.refusal)
    expect(good!.fileName).toBe('good.jpg')
    await good!.file!.discard()
    expect(await temporaryFiles()).toEqual([])
  })

  it('takes as many files as allowed and says that more came', async () => {
    const received = await send(formOf(...Array.from({ length: 5 }, (_, i) => ['file', `${i}.jpg`, noise(10)] as [string, string, Uint8Array<ArrayBuffer>])))
    expect(received.map(r => r.refusal?.code)).toEqual([undefined, undefined, undefined, 'invalid_input'])
    for (const { file } of received) await file?.discard()
  })

  it('stops writing where the room ends', async () => {
    room = 100_000
    const received = await send(formOf(['file', 'a.jpg', noise(400_000)]))
    expect(received[0]!.refusal?.code).toBe('studio_full')
    expect(await temporaryFiles()).toEqual([])
  })

  it.each([
    ['another kind of body', 'application/json', '{}', 'unsupported_media'],
    ['a body without boundary', 'multipart/form-data', 'x', 'malformed_body'],
    ['a body that is no form', 'multipart/form-data; boundary=x', 'not a form', 'malformed_body'],
    ['a form without its end', 'multipart/form-data; boundary=x', '--x\r\nContent-Disposition: form-data; name="file"; filename="a.jpg"\r\n\r\nabc', 'malformed_body'],
    ['a malformed part header', 'multipart/form-data; boundary=x', `--x\r\n${'\0'.repeat(100)}\r\n\r\nabc\r\n--x--\r\n`, 'malformed_body'],
  ])('refuses %s and leaves no file', async (_, type, body, code) => {
    await fetch(address, { method: 'POST', headers: { 'content-type': type }, body })
    await expect(outcome).rejects.toMatchObject({ code })
    expect(await temporaryFiles()).toEqual([])
  })

  it('leaves no file of any part when the connection is cut', async () => {
    const before = outcome
    const head = (name: string) => `--x\r\nContent-Disposition: form-data; name="file"; filename="${name}"\r\n\r\n`
    const sending = httpRequest(address, { method: 'POST', headers: { 'content-type': 'multipart/form-data; boundary=x', 'content-length': 1_000_000 } })
    sending.on('error', () => {})
    sending.write(`${head('whole.jpg')}abc\r\n${head('half.jpg')}${'d'.repeat(100_000)}`)
    await expect.poll(async () => outcome !== before && (await temporaryFiles()).length).toBe(2)
    sending.destroy()
    await expect(outcome).rejects.toMatchObject({ code: 'malformed_body' })
    expect(await temporaryFiles()).toEqual([])
  })
})
