import { contract } from '#shared/schemas/contract'
import { version } from '../../package.json'

export default defineRoute(contract.version, () => ({ version, build: useRuntimeConfig().app.buildId as string }))
