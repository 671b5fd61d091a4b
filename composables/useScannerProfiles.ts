import { contract } from '#build/client-contract'
import type { z } from 'zod'
import type { ScannerProfile, scannerProfileBody } from '#shared/schemas/calibration'

/** A scanner of the shelf with what the service has been taught about it; the newest profile of a process counts. */
export function useScannerProfiles(scannerId: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, scanner: scannerId }
  const { record: scanner, reload: readScanner, error: scannerError, takeOff, putBack } = useShelfRecord('scanners', scannerId)
  const profiles = usePages<ScannerProfile>(cursor => call(contract.listScannerProfiles, { params, query: { cursor, limit: 100 } }))
  const error = computed(() => scannerError.value ?? profiles.error.value)

  const reload = () => Promise.all([readScanner(), profiles.readAll()])
  useHints(['scanners', 'scanner-profiles'], reload)

  async function teach(body: z.input<typeof scannerProfileBody>) {
    await call(contract.createScannerProfile, { params, body })
    await profiles.readAll()
  }

  async function putAway(profile: ScannerProfile) {
    await call(contract.archiveScannerProfile, { params: { ...params, profile: profile.id } })
    await profiles.readAll()
  }

  return { scanner, profiles: profiles.items, error, reload, teach, putAway, takeOff, putBack }
}
