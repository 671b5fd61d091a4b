import { createWriteStream } from 'node:fs'
import type { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { DataStore, ERRORS, Upload } from '@tus/server'
import { ComputeError } from '#shared/errors'
import { dayMs, retentionDays } from '#shared/schemas/retention'
import { uploadMetadata } from '#shared/schemas/uploads'
import type { StudioAccess } from '../services/access'
import { requireDisk } from '../services/room'
import { openUpload, partBytes, partPath, removeUpload, requireUpload, type UploadRow } from '../services/uploads'

/** One person's uploads in one studio, as the protocol's library asks for them: rows for what they are, parts for what has come. */
export class PartStore extends DataStore {
  override extensions = ['creation', 'creation-with-upload', 'termination', 'expiration']

  constructor(private readonly studio: StudioAccess) {
    super()
  }

  override async create(upload: Upload): Promise<Upload> {
    const row = await openUpload(this.studio, { id: upload.id, bytes: upload.size!, metadata: uploadMetadata.parse(upload.metadata ?? {}), origin: 'screen' })
    upload.creation_date = row.createdAt.toISOString()
    return upload
  }

  override async getUpload(id: string): Promise<Upload> {
    const row = await requireUpload(this.studio, id)
    const offset = row.state === 'unfinished' ? await partBytes(row) : row.bytes
    if (offset === null) throw ERRORS.FILE_NO_LONGER_EXISTS
    return new Upload({ id, size: row.bytes, offset, metadata: metadataOf(row), creation_date: row.createdAt.toISOString() })
  }

  override async write(stream: Readable, id: string, offset: number): Promise<number> {
    const row = await requireUpload(this.studio, id)
    if (offset >= row.bytes) return offset
    await requireDisk(row.bytes - offset)
    const part = createWriteStream(partPath(row), { flags: 'r+', start: offset })
    await pipeline(stream, part).catch((error: NodeJS.ErrnoException) => {
      throw error.code === 'ENOSPC' ? new ComputeError('disk_full', 'The disk is full. What has arrived is kept; tell the studio’s owner, and go on later.') : error
    })
    return offset + part.bytesWritten
  }

  override async remove(id: string): Promise<void> {
    await removeUpload(await requireUpload(this.studio, id))
  }

  override getExpiration(): number {
    return dayMs * retentionDays.unfinishedUpload
  }
}

const metadataOf = ({ fileName, lastModifiedMs, fingerprint }: UploadRow): Record<string, string> => ({
  filename: fileName, ...lastModifiedMs === null ? {} : { lastModified: String(lastModifiedMs) }, ...fingerprint === null ? {} : { fingerprint },
})
