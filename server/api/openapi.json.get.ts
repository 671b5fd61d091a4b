import { contract } from '#shared/schemas/contract'
import { openApiDocument } from '#shared/schemas/openapi'
import { version } from '../../package.json'

let document: Record<string, unknown> | undefined

export default defineRoute(contract.openapi, () => document ??= openApiDocument(contract, version))
