import type { FileHandle } from 'node:fs/promises'

const windowBytes = 65_536

/** Reads small pieces of a file anywhere through one window, so that a header costs the same memory whatever the file's size. */
export class FileWindow {
  private window: Buffer = Buffer.alloc(0)
  private start = 0

  private constructor(private readonly file: FileHandle, readonly size: number) {}

  static async over(file: FileHandle) {
    return new FileWindow(file, (await file.stat()).size)
  }

  /** The bytes at `offset`; fewer than asked where the file ends. Longer pieces are read past the window. */
  async bytes(offset: number, length: number): Promise<Buffer> {
    if (length > windowBytes) return this.load(offset, length)
    if (offset < this.start || offset + length > this.start + this.window.length) {
      this.window = await this.load(offset, windowBytes)
      this.start = offset
    }
    return this.window.subarray(offset - this.start, offset - this.start + length)
  }

  private async load(offset: number, length: number): Promise<Buffer> {
    const buffer = Buffer.alloc(Math.max(0, Math.min(length, this.size - offset)))
    const { bytesRead } = await this.file.read(buffer, 0, buffer.length, offset)
    return buffer.subarray(0, bytesRead)
  }
}
