import { mkdir, open, rename, rm, utimes } from 'node:fs/promises'
import { dirname } from 'node:path'
import { engineVersion } from '../version'
import type { Codes } from './codes'

/**
 * Codes of a picture that is slow to decode, kept between calls: a line of JSON, then the samples as they lie in memory.
 * A cache and no exchange format: what was written by another engine or cut off counts as not there.
 */
interface Head { engine: string, width: number, height: number, channels: number, bits: 8 | 16 }
const headBytes = 256

export async function readWorkingFile(path: string): Promise<Codes | null> {
  const file = await open(path).catch(() => null)
  if (!file) return null
  try {
    const head = Buffer.alloc(headBytes)
    if ((await file.read(head, 0, headBytes, 0)).bytesRead < headBytes) return null
    const { engine, width, height, channels, bits } = JSON.parse(head.toString('utf8')) as Head
    const bytes = Buffer.alloc(width * height * channels * bits / 8)
    if (engine !== engineVersion || (await file.stat()).size !== headBytes + bytes.length) return null
    for (let done = 0; done < bytes.length;) {
      const { bytesRead } = await file.read(bytes, done, Math.min(bytes.length - done, 1 << 30), headBytes + done)
      if (bytesRead === 0) return null
      done += bytesRead
    }
    // What is used stays longest.
    const now = new Date()
    await utimes(path, now, now).catch(() => {})
    return { width, height, channels, codes: bits === 16 ? new Uint16Array(bytes.buffer, bytes.byteOffset, bytes.length / 2) : bytes }
  }
  finally {
    await file.close()
  }
}

/** Whole or not at all. A full disk costs the copy, not the picture. */
export async function writeWorkingFile(path: string, { width, height, channels, codes }: Codes): Promise<void> {
  const head: Head = { engine: engineVersion, width, height, channels, bits: codes instanceof Uint16Array ? 16 : 8 }
  const part = `${path}.${process.pid}.part`
  try {
    await mkdir(dirname(path), { recursive: true })
    const file = await open(part, 'w')
    try {
      await file.writev([Buffer.from(JSON.stringify(head).padEnd(headBytes)), Buffer.from(codes.buffer, codes.byteOffset, codes.byteLength)])
    }
    finally {
      await file.close()
    }
    await rename(part, path)
  }
  catch {
    await rm(part, { force: true }).catch(() => {})
  }
}
