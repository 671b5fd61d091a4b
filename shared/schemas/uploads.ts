import { z } from 'zod'
import { endpoint } from './endpoint'
import { limits } from './limits'
import { photo } from './photos'
import { id, instant, listOf, listQuery } from './primitives'

export const uploadStates = ['unfinished', 'kept', 'refused'] as const
export const uploadOrigins = ['screen', 'share-sheet'] as const

/** A file on its way to becoming a photo, by the resumable protocol; its sender alone sees it. */
export const upload = z.object({
  id, fileName: z.string(), bytes: z.number().int(), receivedBytes: z.number().int(),
  /** as the sender told them, to know the file again */
  lastModifiedMs: z.number().int().nullable(), fingerprint: z.string().nullable(),
  /** `share-sheet`: whole, and waiting for its sender’s word */
  origin: z.enum(uploadOrigins),
  state: z.enum(uploadStates), photoId: id.nullable(), refusal: z.object({ code: z.string(), message: z.string() }).nullable(),
  createdAt: instant, expiresAt: instant,
})
export type Upload = z.infer<typeof upload>

/** What `Upload-Metadata` may say; other keys are let pass and forgotten. A fingerprint (shared/uploads) is held against the whole file. */
export const uploadMetadata = z.object({
  filename: z.string().max(limits.fileNameLength, `A file name has at most ${limits.fileNameLength} characters.`).nullish(),
  lastModified: z.string().regex(/^-?\d{1,15}$/, 'Milliseconds since 1970, as digits.').transform(Number).nullish(),
  fingerprint: z.string().regex(/^[0-9a-f]{8}$/, 'CRC-32 of the file’s slices, as 8 hexadecimal digits.').nullish(),
})

const root = '/api/studios/:studio/uploads' as const
const octets = { 'application/offset+octet-stream': 'the bytes from `Upload-Offset` on' }
const tus = (what: string) => `${what} (tus 1.0.0, tus.io/protocols/resumable-upload; send \`Tus-Resumable: 1.0.0\`.)`
export const uploadEndpoints = {
  uploadTerms: endpoint({ method: 'OPTIONS', path: root, access: 'member', summary: tus('Versions, extensions and the largest size.'), answers: { 204: null } }),
  listUploads: endpoint({ method: 'GET', path: root, access: 'member', summary: 'One’s own uploads that are not finished, newest first.', query: listQuery, answers: { 200: listOf(upload) } }),
  createUpload: endpoint({ method: 'POST', path: root, access: 'member', summary: tus('Begin an upload: `Upload-Length`, and `Upload-Metadata` with `filename`, `lastModified` and `fingerprint` if wanted; `Location` names it.'), answers: { 201: null } }),
  upload: endpoint({ method: 'GET', path: `${root}/:upload`, access: 'member', summary: 'One upload and what became of it.', answers: { 200: upload } }),
  uploadOffset: endpoint({ method: 'HEAD', path: `${root}/:upload`, access: 'member', summary: tus('How many bytes have arrived.'), answers: { 200: null } }),
  sendUpload: endpoint({ method: 'PATCH', path: `${root}/:upload`, access: 'member', summary: tus('Send bytes. With the last one the photo is taken in; what it is refused for is answered here, and by `finish`.'), otherBodies: octets, answers: { 204: null } }),
  removeUpload: endpoint({ method: 'DELETE', path: `${root}/:upload`, access: 'member', summary: tus('Give an upload up and erase what has arrived.'), answers: { 204: null } }),
  finishUpload: endpoint({ method: 'POST', path: `${root}/:upload/finish`, access: 'member', summary: 'The photo of an upload that has arrived whole, taken in if it has not been yet. Asked again, the same answer.', answers: { 200: photo, 201: photo } }),
}
