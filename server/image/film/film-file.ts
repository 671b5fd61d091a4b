import { createHash } from 'node:crypto'
import { closeSync, openSync, readSync, writeSync } from 'node:fs'

/**
 * A file written from front to back. Writing is synchronous on purpose: the threads that a callback would need are busy
 * compressing, and the bytes go to the system's cache.
 */
export class FilmFile {
  private readonly file: number
  position = 0

  constructor(private readonly path: string) {
    this.file = openSync(path, 'w')
  }

  write(bytes: Buffer): void {
    for (let done = 0; done < bytes.length;) done += writeSync(this.file, bytes, done, bytes.length - done)
    this.position += bytes.length
  }

  patch(bytes: Buffer, at: number): void {
    writeSync(this.file, bytes, 0, bytes.length, at)
  }

  close(): void {
    closeSync(this.file)
  }

  /** The hash of what stands on the disk, read back. */
  static sha256(path: string): string {
    const hash = createHash('sha256')
    const file = openSync(path, 'r')
    const piece = Buffer.allocUnsafe(1 << 20)
    try {
      for (let read = readSync(file, piece); read > 0; read = readSync(file, piece)) hash.update(piece.subarray(0, read))
    }
    finally {
      closeSync(file)
    }
    return hash.digest('hex')
  }
}
