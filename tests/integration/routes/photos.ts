import { newPicture, uploadForm } from '../../support/pictures'
import type { RouteCase } from './route-case'

const photos = 'studios/[studio]/photos'
const upload = (text: string, field = 'file') => uploadForm([['weir.jpg', Buffer.from(text)]], field)

export const photoCases: RouteCase[] = [
  { file: `${photos}/index.get.ts`, row: 'listPhotos', good: () => ({}) },
  {
    file: `${photos}/index.post.ts`, row: 'uploadPhotos', good: async () => ({ body: uploadForm([['weir.jpg', await newPicture()]]), status: 201 }),
    bad: [
      { why: 'what is no picture', call: () => ({ body: upload('GIF89a, or so it says'), status: 415, code: 'not_an_image' }) },
      { why: 'an empty file', call: () => ({ body: upload(''), status: 415, code: 'not_an_image' }) },
      { why: 'a picture under another name', call: () => ({ body: upload('x', 'scan'), status: 422, code: 'invalid_input' }) },
      { why: 'JSON', call: () => ({ body: undefined, json: {}, status: 415, code: 'unsupported_media' }) },
      { why: 'an upload that breaks off', call: () => ({ body: '--b\r\ncontent-disposition: form-data; name="file"; filename="a.jpg"\r\n\r\nab', headers: { 'content-type': 'multipart/form-data; boundary=b' }, status: 400, code: 'malformed_body' }) },
    ],
  },
  { file: `${photos}/[photo]/index.get.ts`, row: 'photo', good: async ({ newPhoto }) => ({ params: { photo: await newPhoto() } }) },
  {
    file: `${photos}/[photo]/index.patch.ts`, row: 'changePhoto', good: async ({ newPhoto }) => ({ params: { photo: await newPhoto() }, json: { name: 'Weir', revision: 1 } }),
    bad: [{ why: 'an old revision', call: () => ({ json: { name: 'Weir', revision: 3 }, status: 409, code: 'stale_revision' }) }],
  },
  { file: `${photos}/[photo]/index.delete.ts`, row: 'binPhoto', good: async ({ newPhoto }) => ({ params: { photo: await newPhoto() }, status: 204 }) },
  { file: `${photos}/[photo]/restore.post.ts`, row: 'restorePhoto', good: async ({ newPhoto }) => ({ params: { photo: await newPhoto() } }) },
  { file: `${photos}/[photo]/file.get.ts`, row: 'photoFile', good: async ({ newPhoto }) => ({ params: { photo: await newPhoto() } }) },
  { file: `${photos}/[photo]/thumbnail.get.ts`, row: 'photoThumbnail', good: async ({ newPhoto }) => ({ params: { photo: await newPhoto() } }) },
  {
    file: `${photos}/[photo]/proxy.get.ts`, row: 'photoProxy', good: async ({ newPhoto }) => ({ params: { photo: await newPhoto() }, query: { width: '32' } }),
    bad: [
      { why: 'a region outside the picture', call: () => ({ query: { region: '0,0,2,1' }, status: 422, code: 'invalid_input' }) },
      { why: 'a width that is no number', call: () => ({ query: { width: 'NaN' }, status: 422, code: 'invalid_input' }) },
    ],
  },
]
