import { createReadStream } from 'node:fs'
import { stat } from 'node:fs/promises'
import type { Readable } from 'node:stream'
import { CopyObjectCommand, DeleteObjectCommand, DeleteObjectsCommand, GetObjectCommand, HeadObjectCommand, ListObjectsV2Command, S3Client } from '@aws-sdk/client-s3'
import { Upload } from '@aws-sdk/lib-storage'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import type { StoredFile } from './disk'

export interface BucketSettings {
  bucket: string
  region: string
  /** of a store that isn't the default one; its buckets are then named in the path */
  endpoint?: string
  accessKeyId: string
  secretAccessKey: string
}

const partBytes = 8 * 1024 * 1024
/** The interface's own bound on keys in one deletion. */
const deletionsAtOnce = 1000

/** Objects by key in an S3-compatible store. An object appears whole or not at all. */
export function openBucket({ bucket, region, endpoint, ...credentials }: BucketSettings) {
  const client = new S3Client({
    region, endpoint, credentials, forcePathStyle: endpoint !== undefined,
    // Stores of other makes don't know the newer checksums.
    requestChecksumCalculation: 'WHEN_REQUIRED', responseChecksumValidation: 'WHEN_REQUIRED',
  })
  const at = (key: string) => ({ Bucket: bucket, Key: key })
  const remove = async (key: string) => void await client.send(new DeleteObjectCommand(at(key)))

  async function list(below: string): Promise<StoredFile[]> {
    const files: StoredFile[] = []
    let next: string | undefined
    do {
      const page = await client.send(new ListObjectsV2Command({ Bucket: bucket, Prefix: `${below}/`, ContinuationToken: next }))
      files.push(...(page.Contents ?? []).map(object => ({ key: object.Key!, bytes: object.Size ?? 0, changedAt: object.LastModified?.getTime() ?? 0 })))
      next = page.IsTruncated ? page.NextContinuationToken : undefined
    } while (next)
    return files
  }

  return {
    /** Streams a local file up, in parts when it is large. */
    async put(key: string, path: string): Promise<void> {
      const { size } = await stat(path)
      const body = createReadStream(path, { highWaterMark: 1024 * 1024 })
      await new Upload({ client, params: { ...at(key), Body: body, ContentLength: size < partBytes ? size : undefined }, partSize: partBytes, queueSize: 2, leavePartsOnError: false }).done()
    },
    async stat(key: string): Promise<StoredFile | null> {
      try {
        const head = await client.send(new HeadObjectCommand(at(key)))
        return { key, bytes: head.ContentLength ?? 0, changedAt: head.LastModified?.getTime() ?? 0 }
      }
      catch (error) {
        if (isAbsent(error)) return null
        throw error
      }
    },
    /** The object's bytes; null when there is none. */
    async read(key: string, range?: { start: number, end: number }): Promise<Readable | null> {
      try {
        const answer = await client.send(new GetObjectCommand({ ...at(key), Range: range && `bytes=${range.start}-${range.end}` }))
        return answer.Body as Readable
      }
      catch (error) {
        if (isAbsent(error)) return null
        throw error
      }
    },
    remove,
    async move(from: string, to: string): Promise<void> {
      await client.send(new CopyObjectCommand({ ...at(to), CopySource: `${bucket}/${encodeURI(from)}` }))
      await remove(from)
    },
    async removeFolder(below: string): Promise<void> {
      const files = await list(below)
      for (let i = 0; i < files.length; i += deletionsAtOnce) {
        const Objects = files.slice(i, i + deletionsAtOnce).map(({ key }) => ({ Key: key }))
        await client.send(new DeleteObjectsCommand({ Bucket: bucket, Delete: { Objects, Quiet: true } }))
      }
    },
    list,
    /** An address that gives the object to whoever holds it, for so long. */
    link: (key: string, seconds: number, { contentType, disposition }: { contentType: string, disposition?: string }): Promise<string> =>
      getSignedUrl(client, new GetObjectCommand({ ...at(key), ResponseContentType: contentType, ResponseContentDisposition: disposition }), { expiresIn: seconds }),
    close: () => client.destroy(),
  }
}
export type Bucket = ReturnType<typeof openBucket>

const isAbsent = (error: unknown): boolean => {
  const { name, $metadata } = error as { name?: string, $metadata?: { httpStatusCode?: number } }
  return name === 'NoSuchKey' || name === 'NotFound' || $metadata?.httpStatusCode === 404
}
