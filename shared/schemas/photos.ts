import { z } from 'zod'
import { endpoint, streamed } from './endpoint'
import { pictureFormatNames, pictureFormats, pictureMediaTypes, pictureNotes } from './picture-formats'
import { fraction, id, instant, listOf, listQuery, name, revision } from './primitives'

export const photo = z.object({
  id, name: z.string(), uploaderId: id, format: z.enum(pictureFormats), bytes: z.number().int(), sha256: z.string(),
  /** upright, after the orientation tag */
  width: z.number().int(), height: z.number().int(), orientation: z.number().int().min(1).max(8),
  colourProfile: z.string(),
  /** what else the file holds and is left out: only its first, still picture in standard range is used */
  notes: z.array(z.enum(pictureNotes)), binnedAt: instant.nullable(), createdAt: instant, revision,
})
export type Photo = z.infer<typeof photo>

/** `x,y,width,height` in fractions of the upright picture after quarter turns and straightening. */
export const region = z.string().regex(/^(?:\d*\.?\d+(?:e-?\d+)?,){3}\d*\.?\d+(?:e-?\d+)?$/i, 'Write the region as x,y,width,height.')
  .transform(s => s.split(',').map(Number) as [number, number, number, number])
  .pipe(z.tuple([fraction, fraction, fraction.gt(0), fraction.gt(0)]))
  .refine(([x, y, width, height]) => x + width <= 1 + 1e-9 && y + height <= 1 + 1e-9, 'The region reaches beyond the picture.')

export const proxyQuery = z.strictObject({
  width: z.coerce.number().int().min(16).max(2400).default(1200),
  /** pixels; without it, what keeps the region’s shape */
  height: z.coerce.number().int().min(16).max(2400).optional(),
  region: region.optional(),
  quarterTurns: z.coerce.number().int().min(0).max(3).default(0),
  straightenDegrees: z.coerce.number().min(-45).max(45).default(0),
})

const root = '/api/studios/:studio/photos' as const
/** A picture of an upload that was not taken, by the file name it came with, and why. */
export const refusedFile = z.object({ name: z.string(), code: z.string(), message: z.string() })
const photos = z.object({ items: z.array(photo), refused: z.array(refusedFile) })
export const photoEndpoints = {
  listPhotos: endpoint({ method: 'GET', path: root, access: 'member', summary: 'Photos that one may see.', query: listQuery.extend({ bin: z.stringbool().optional() }), answers: { 200: listOf(photo) } }),
  uploadPhotos: endpoint({ method: 'POST', path: root, access: 'member', summary: 'Upload one or many photos, streamed. Good pictures are taken even when others are refused; when none can be taken the answer is the first one’s error.', otherBodies: { 'multipart/form-data': `Each picture as a part named \`file\` (${Object.values(pictureFormatNames).join(', ')}; known by its content).` }, answers: { 200: photos, 201: photos } }),
  photo: endpoint({ method: 'GET', path: `${root}/:photo`, access: 'member', summary: 'One photo.', answers: { 200: photo } }),
  changePhoto: endpoint({ method: 'PATCH', path: `${root}/:photo`, access: 'member', summary: 'Rename a photo.', body: z.strictObject({ name, revision }), answers: { 200: photo } }),
  binPhoto: endpoint({ method: 'DELETE', path: `${root}/:photo`, access: 'member', summary: 'Put a photo into the bin.', answers: { 204: null } }),
  restorePhoto: endpoint({ method: 'POST', path: `${root}/:photo/restore`, access: 'member', summary: 'Take it out of the bin.', answers: { 200: photo } }),
  photoFile: endpoint({ method: 'GET', path: `${root}/:photo/file`, access: 'member', summary: 'The original, byte for byte.', answers: { 200: pictureMediaTypes, ...streamed(pictureMediaTypes) } }),
  photoThumbnail: endpoint({ method: 'GET', path: `${root}/:photo/thumbnail`, access: 'member', summary: 'A small black-and-white picture, 480 px on its longer side.', answers: { 200: ['image/jpeg'], ...streamed(['image/jpeg']) } }),
  photoProxy: endpoint({ method: 'GET', path: `${root}/:photo/proxy`, access: 'member', summary: 'Working-space channels, 16 bit little-endian, interleaved red, green, blue; `X-Width` and `X-Height` give the pixels.', query: proxyQuery, answers: { 200: ['application/octet-stream'], ...streamed(['application/octet-stream']) } }),
}
