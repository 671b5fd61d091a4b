import { readSettings, type StorageSettings } from '../config'
import { openStorage, type Storage } from '../storage'

let opened: Storage | undefined

/** The process's one storage. */
export const storage = (): Storage => opened ??= openConfiguredStorage(readSettings())

/** On the disk, and in a bucket where one is named. */
export function openConfiguredStorage({ STORAGE_DIR, S3_BUCKET, S3_REGION, S3_ENDPOINT, S3_ACCESS_KEY_ID, S3_SECRET_ACCESS_KEY }: StorageSettings): Storage {
  return openStorage(STORAGE_DIR, S3_BUCKET
    ? { bucket: S3_BUCKET, region: S3_REGION, endpoint: S3_ENDPOINT, accessKeyId: S3_ACCESS_KEY_ID!, secretAccessKey: S3_SECRET_ACCESS_KEY! }
    : undefined)
}
