import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import S3rver from 's3rver'
import { onTestFinished } from 'vitest'

/** A local S3-compatible store (s3rver) with one empty bucket, ended with the test; its settings as the service reads them. */
export async function newBucket() {
  const server = new S3rver({ port: 0, address: '127.0.0.1', silent: true, directory: mkdtempSync(join(tmpdir(), 'emulside-bucket-')), configureBuckets: [{ name: 'ropeworks', configs: [] }] })
  const { port } = await server.run()
  onTestFinished(() => server.close())
  return {
    S3_BUCKET: 'ropeworks', S3_REGION: 'us-east-1', S3_ENDPOINT: `http://127.0.0.1:${port}`,
    // s3rver's own, fixed pair
    S3_ACCESS_KEY_ID: 'S3RVER', S3_SECRET_ACCESS_KEY: 'S3RVER',
  }
}
