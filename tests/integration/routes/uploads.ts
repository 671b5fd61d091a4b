import { newPicture } from '../../support/pictures'
import { beginUpload, sendFrom } from '../../support/resumable'
import type { RouteCase } from './route-case'
import type { World } from './world'

const uploads = 'studios/[studio]/uploads'
const tus = { 'tus-resumable': '1.0.0' }
const lengthOf = (bytes: string, more: Record<string, string> = {}) => ({ headers: { ...tus, 'upload-length': bytes, ...more } })
const named = (pairs: Record<string, string>) => ({ 'upload-metadata': Object.entries(pairs).map(([key, value]) => `${key} ${Buffer.from(value).toString('base64')}`).join(',') })

/** Begun by the member, to whom alone it belongs. */
async function begun({ member, owner }: World, { whole = false } = {}) {
  const picture = await newPicture()
  const path = await beginUpload(member.agent, owner.root, picture)
  if (whole) await sendFrom(member.agent, path, 0, picture)
  return { params: { upload: path.split('/').at(-1)! }, picture }
}
const piece = (bytes: Uint8Array, offset: string) => ({ body: new Uint8Array(bytes), headers: { ...tus, 'upload-offset': offset, 'content-type': 'application/offset+octet-stream' } })

export const uploadCases: RouteCase[] = [
  { file: `${uploads}/index.options.ts`, row: 'uploadTerms', good: () => ({ status: 204 }) },
  { file: `${uploads}/index.get.ts`, row: 'listUploads', good: () => ({}) },
  {
    file: `${uploads}/index.post.ts`, row: 'createUpload', good: () => ({ ...lengthOf('1000', named({ filename: 'weir.jpg' })), status: 201 }),
    bad: [
      { why: 'an empty file', call: () => ({ ...lengthOf('0'), status: 415, code: 'not_an_image' }) },
      { why: 'more than a file may hold', call: () => ({ ...lengthOf('1000000001'), status: 413, code: 'file_too_large' }) },
      { why: 'a length that is none', call: () => ({ ...lengthOf('many'), status: 400, code: 'malformed_body' }) },
      { why: 'no length', call: () => ({ headers: tus, status: 400, code: 'malformed_body' }) },
      { why: 'another version of the protocol', call: () => ({ headers: { 'upload-length': '5' }, status: 412, code: 'upload_protocol' }) },
      { why: 'metadata that can’t be read', call: () => ({ ...lengthOf('5', { 'upload-metadata': 'filename ÿ' }), status: 400, code: 'malformed_body' }) },
      { why: 'a fingerprint that is none', call: () => ({ ...lengthOf('5', named({ fingerprint: 'whorl' })), status: 422, code: 'invalid_input' }) },
      { why: 'a name that is too long', call: () => ({ ...lengthOf('5', named({ filename: 'w'.repeat(256) })), status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: `${uploads}/[upload]/index.get.ts`, row: 'upload', good: async world => ({ params: (await begun(world)).params }) },
  { file: `${uploads}/[upload]/index.head.ts`, row: 'uploadOffset', good: async world => ({ params: (await begun(world)).params, headers: tus }) },
  {
    file: `${uploads}/[upload]/index.patch.ts`, row: 'sendUpload',
    good: async (world) => {
      const { params, picture } = await begun(world)
      return { params, ...piece(picture, '0'), status: 204 }
    },
    bad: [
      { why: 'a piece that doesn’t begin at the end', call: () => ({ ...piece(Buffer.from('x'), '7'), status: 409, code: 'wrong_offset' }) },
      { why: 'more than was announced', call: () => ({ ...piece(Buffer.alloc(3_000_000), '0'), status: 413, code: 'file_too_large' }) },
      { why: 'another kind of body', call: () => ({ body: 'x', headers: { ...tus, 'upload-offset': '0', 'content-type': 'text/plain' }, status: 415, code: 'unsupported_media' }) },
    ],
  },
  { file: `${uploads}/[upload]/index.delete.ts`, row: 'removeUpload', good: async world => ({ params: (await begun(world)).params, headers: tus, status: 204 }) },
  {
    file: `${uploads}/[upload]/finish.post.ts`, row: 'finishUpload', good: async world => ({ params: (await begun(world, { whole: true })).params }),
  },
]
