import { z } from 'zod'
import { accountEndpoints } from './account'
import { benchEndpoints } from './benches'
import { classEndpoints } from './classes'
import { comparisonEndpoints, scannerProfileEndpoints, tabletEndpoints, walkEndpoints } from './calibration'
import { curveEndpoints } from './curves'
import { endpoint, type Endpoint } from './endpoint'
import { findingEndpoints } from './findings'
import { negativeEndpoints } from './negatives'
import { openIdEndpoints } from './openid'
import { passkeyEndpoints } from './passkeys'
import { peopleEndpoints } from './people'
import { photoEndpoints } from './photos'
import { scanEndpoints } from './scans'
import { shelfEndpoints } from './shelf'
import { uploadEndpoints } from './uploads'
import { wedgeEndpoints } from './wedges'

const serviceEndpoints = {
  version: endpoint({ method: 'GET', path: '/api', access: 'public', summary: 'Version and build.', answers: { 200: z.object({ version: z.string(), build: z.string() }) } }),
  openapi: endpoint({ method: 'GET', path: '/api/openapi.json', access: 'public', summary: 'This contract as OpenAPI 3.1.', answers: { 200: z.record(z.string(), z.unknown()) } }),
  live: endpoint({ method: 'GET', path: '/api/health/live', access: 'public', summary: 'The process answers.', answers: { 200: z.object({ status: z.literal('ok') }) } }),
  ready: endpoint({ method: 'GET', path: '/api/health/ready', access: 'public', summary: 'Database and storage answer too.', answers: { 200: z.object({ status: z.literal('ok') }) } }),
}

/** Every route of the service, by name. Validation, types and the OpenAPI document all come from here. */
export const contract = {
  ...serviceEndpoints, ...peopleEndpoints, ...accountEndpoints, ...passkeyEndpoints, ...openIdEndpoints, ...shelfEndpoints, ...benchEndpoints, ...curveEndpoints, ...scanEndpoints, ...walkEndpoints, ...tabletEndpoints, ...scannerProfileEndpoints, ...comparisonEndpoints, ...findingEndpoints, ...photoEndpoints, ...uploadEndpoints, ...negativeEndpoints, ...classEndpoints, ...wedgeEndpoints,
} satisfies Record<string, Endpoint>
