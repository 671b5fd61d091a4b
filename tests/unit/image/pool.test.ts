import { readFileSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout } from 'node:timers/promises'
import { build } from 'esbuild'
import { afterEach, beforeAll, describe, expect, it } from 'vitest'
import { type ImageChild, type ImageChildSettings, openImageChild } from '../../../server/image/pool'
import { pngFile } from '../../support/pictures/png-file'
import { filmOrder, openWorkbench, wholePicture } from '../../support/pictures/workbench'

const root = join(import.meta.dirname, '../../..')
const programPath = join(root, 'node_modules/.cache/emulside-test/image-child.mjs')
const bench = openWorkbench()
const small = bench.keep(pngFile({ width: 30, height: 20, bitDepth: 8, channels: 1, samples: new Uint8Array(600).fill(90) }))

beforeAll(() => build({
  entryPoints: [join(root, 'server/image/child.ts')], outfile: programPath, bundle: true, platform: 'node', target: 'node20', format: 'esm',
  packages: 'external', alias: { '#shared': join(root, 'shared') }, logLevel: 'error',
}).then(() => undefined))

const open: ImageChild[] = []
function openChild(settings: Partial<ImageChildSettings> = {}) {
  const child = openImageChild({ programPath, addressSpaceBytes: 8_000_000_000, timeoutSeconds: 60, ...settings })
  open.push(child)
  return child
}
afterEach(() => Promise.all(open.splice(0).map(child => child.close())))

/** A film that takes long enough to be interrupted. */
const longFilm = () => ({ path: small, target: bench.fresh('long.tiff'), order: filmOrder(9000, 6000), renderKey: 'long' })
const failed = expect.objectContaining({ code: 'image_child_failed', message: expect.stringMatching(/Try again/) })

describe('the picture child', () => {
  it('answers each kind of call', async () => {
    const child = openChild()
    expect(await child.call('probe', { path: small })).toMatchObject({ format: 'png', width: 30, height: 20 })
    const thumbnail = bench.fresh('thumbnail.jpg')
    expect(await child.call('thumbnail', { path: small, target: thumbnail, longerSide: 15 })).toEqual({ width: 15, height: 10 })
    const proxy = bench.fresh('proxy')
    await child.call('proxy', { path: small, target: proxy, geometry: wholePicture, width: 12, height: 8 })
    expect(statSync(proxy).size).toBe(12 * 8 * 6)
    const film = await child.call('film', { path: small, target: bench.fresh('film.tiff'), order: filmOrder(60, 40), renderKey: 'k' })
    expect(film.sha256).toMatch(/^[0-9a-f]{64}$/)
    const forecast = bench.fresh('forecast.png')
    expect(await child.call('forecast', { path: small, target: forecast, order: filmOrder(60, 40), width: 30, state: 'print', palette: 'cyanotype' })).toEqual({ width: 30, height: 20 })
  })

  it('passes on a refusal with its code and goes on in the same process', async () => {
    const child = openChild()
    await expect(child.call('probe', { path: bench.keep(Buffer.from('hello')) })).rejects.toMatchObject({ code: 'not_an_image' })
    const { processId } = child
    await child.call('probe', { path: small })
    expect(child.processId).toBe(processId)
  })

  it('tells progress from 0 to 1, rising', async () => {
    const seen: number[] = []
    await openChild().call('film', longFilm(), { onProgress: fraction => seen.push(fraction) })
    expect(seen.length).toBeGreaterThan(1)
    expect(seen).toEqual([...seen].sort((a, b) => a - b))
    expect(seen.every(fraction => fraction >= 0 && fraction <= 1)).toBe(true)
  })

  it('killed in the middle of a job fails that job only; the next gets a fresh one', async () => {
    const child = openChild()
    const doomed = child.call('film', longFilm(), { onProgress: () => process.kill(child.processId!, 'SIGKILL') })
    const next = child.call('probe', { path: small })
    const later = child.call('film', { path: small, target: bench.fresh('later.tiff'), order: filmOrder(60, 40), renderKey: 'k' })
    const first = await doomed.then(() => 'done', error => error)
    expect(first).toEqual(failed)
    expect(await next).toMatchObject({ width: 30 })
    expect(await later).toMatchObject({ bytes: expect.any(Number) })
  })

  it('does a waiting small job before a waiting film', async () => {
    const child = openChild()
    const order: string[] = []
    const film = (name: string) => child.call('film', { path: small, target: bench.fresh('film.tiff'), order: filmOrder(600, 400), renderKey: 'k' }).then(() => order.push(name))
    await Promise.all([film('first film'), film('second film'), child.call('probe', { path: small }).then(() => order.push('probe'))])
    expect(order).toEqual(['first film', 'probe', 'second film'])
  })

  it('is ended with a job that takes too long', async () => {
    const child = openChild({ timeoutSeconds: 0.6 })
    await expect(child.call('film', longFilm())).rejects.toThrow('longer than 0.6 s')
  })

  it('drops an aborted job, waiting or running, and goes on', async () => {
    const child = openChild()
    const running = new AbortController(), waiting = new AbortController()
    const first = child.call('film', longFilm(), { signal: running.signal, onProgress: () => running.abort(new Error('changed their mind')) })
    const second = child.call('film', longFilm(), { signal: waiting.signal })
    waiting.abort(new Error('not wanted'))
    await expect(second).rejects.toThrow('not wanted')
    await expect(first).rejects.toThrow('changed their mind')
    expect(await child.call('probe', { path: small })).toMatchObject({ width: 30 })
  })

  it('closed fails what runs and waits, and leaves no process', async () => {
    const child = openChild()
    const jobs = [child.call('film', longFilm(), { onProgress: () => void child.close() }), child.call('probe', { path: small }).then(() => child.call('film', longFilm()))]
    const outcomes = await Promise.allSettled(jobs)
    expect(outcomes.map(outcome => outcome.status)).toContain('rejected')
    await child.close()
    expect(child.processId).toBeUndefined()
    await expect(child.call('probe', { path: small })).rejects.toEqual(failed)
  })

  it.skipIf(process.platform !== 'linux')('may not map more memory than it is given', async () => {
    const addressSpaceBytes = 1_500_000_000
    const child = openChild({ addressSpaceBytes })
    await child.call('probe', { path: small })
    expect(readFileSync(`/proc/${child.processId}/limits`, 'utf8')).toMatch(new RegExp(`Max address space +${Math.floor(addressSpaceBytes / 1024) * 1024} `))
    // 120 million pixels of 6 bytes can't be held in it; the header says nothing of that
    const row = new Uint8Array(12_000)
    const big = bench.keep(await import('sharp').then(({ default: sharp }) => sharp({ create: { width: row.length, height: 10_000, channels: 3, background: '#888' } }).toColourspace('rgb16').png({ compressionLevel: 1 }).toBuffer()))
    await expect(child.call('proxy', { path: big, target: bench.fresh('proxy'), geometry: wholePicture, width: 10, height: 8 })).rejects.toEqual(failed)
    await setTimeout(50)
    expect(await child.call('probe', { path: small })).toMatchObject({ width: 30 })
  })
})
