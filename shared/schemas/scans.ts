import { z } from 'zod'
import { reading } from './curves'
import { endpoint, streamed } from './endpoint'
import { pictureFormatNames, pictureMediaTypes } from './picture-formats'
import { id } from './primitives'

const pixel = z.number().min(-100_000).max(100_000)
const point = z.tuple([pixel, pixel])
/** Centres of the four corner markers: top-left, top-right, bottom-right, bottom-left of the print; pixels of the upright upload. */
export const scanCorners = z.tuple([point, point, point, point])
const quality = z.enum(['scan', 'phone'])
const printNumber = z.number().int().min(1).max(9999)
const paperLightness = z.number().min(20).max(100)

const jsonText = (text: unknown) => {
  try {
    return JSON.parse(String(text)) as unknown
  }
  catch {
    return text
  }
}
const numeric = (text: unknown) => typeof text === 'string' && text.trim() !== '' ? Number(text) : text

/** The fields beside the file in a multipart body; they come as text, corners as JSON. */
export const scanFields = z.strictObject({
  id: z.uuidv7().optional(),
  corners: z.preprocess(jsonText, scanCorners).optional(),
  printNumber: z.preprocess(numeric, printNumber).optional(),
  scannerId: id.optional(),
  quality: quality.optional(),
  paperLightness: z.preprocess(numeric, paperLightness).optional(),
})
export type ScanFields = z.infer<typeof scanFields>

/** What is left out stays as it was; null takes it back. `wedgeId` says which wedge of the bench it is when the code can’t be read. */
export const readAgainBody = z.strictObject({
  corners: scanCorners.nullish(), quality: quality.nullish(), scannerId: id.nullish(), printNumber: printNumber.nullish(), paperLightness: paperLightness.nullish(), wedgeId: id.optional(),
})
export type ReadAgain = z.infer<typeof readAgainBody>

export const scanMedia = {
  'multipart/form-data': `The picture as \`scan\` (${Object.values(pictureFormatNames).join(', ')}); fields \`corners\` (JSON), \`printNumber\`, \`scannerId\`, \`quality\` (scan or phone), \`paperLightness\`, \`id\`.`,
} as const
const root = '/api/studios/:studio/readings/:reading' as const
export const scanEndpoints = {
  createWedgeReading: endpoint({
    method: 'POST', path: '/api/studios/:studio/wedges/:wedge/readings', access: 'technician',
    summary: 'Read a scan of this wedge’s print: 201 when that took no more than five seconds, else 202. The same bytes again answer the stored reading.',
    otherBodies: scanMedia, answers: { 200: reading, 201: reading, 202: reading },
  }),
  readAgain: endpoint({ method: 'POST', path: `${root}/read-again`, access: 'technician', summary: 'Read the stored scan again, with corners put by hand or another choice.', body: readAgainBody, answers: { 200: reading, 202: reading } }),
  readingPicture: endpoint({
    method: 'GET', path: `${root}/picture`, access: 'member', summary: 'The scan upright, small; with the read parts of the patches drawn over it when asked.',
    query: z.strictObject({ width: z.coerce.number().int().min(64).max(4000).default(1200), cells: z.stringbool().default(false) }),
    answers: { 200: ['image/jpeg'], ...streamed(['image/jpeg']) },
  }),
  readingFile: endpoint({ method: 'GET', path: `${root}/file`, access: 'technician', summary: 'The scan as it was handed in.', answers: { 200: pictureMediaTypes, ...streamed(pictureMediaTypes) } }),
  deleteReading: endpoint({ method: 'DELETE', path: root, access: 'technician', summary: 'Remove a reading that nothing rests on, with its scan.', answers: { 204: null } }),
}
