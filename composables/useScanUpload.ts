import { contract } from '#build/client-contract'
import type { Reading } from '#shared/schemas/curves'

export interface ScanChoice { wedgeId?: string, printNumber?: number, scannerId?: string, quality?: 'scan' | 'phone' }
export interface SendingScan { name: string, bytes: number, /** of the bytes that have left, 0 to 1 */ share: number }

/** Sends the scan or picture of a print; one at a time, and it can be stopped. */
export function useScanUpload(benchId: string) {
  const studio = useStudioStore()
  const sending = ref<SendingScan | null>(null)
  const problem = ref<string | null>(null)
  let stopped: AbortController | undefined
  onScopeDispose(() => stopped?.abort())

  /** The reading, perhaps still being made; null when it was refused or stopped. */
  async function send(file: File, { wedgeId, ...choice }: ScanChoice): Promise<Reading | null> {
    if (sending.value) return null
    stopped = new AbortController()
    problem.value = null
    sending.value = { name: file.name, bytes: file.size, share: 0 }
    const onShare = (share: number) => sending.value && (sending.value.share = share)
    const form = formOf(file, choice)
    try {
      return wedgeId
        ? await uploadForm(contract.createWedgeReading, { ...studio.params, wedge: wedgeId }, form, onShare, stopped.signal)
        : await uploadForm(contract.createReading, { ...studio.params, bench: benchId }, form, onShare, stopped.signal)
    }
    catch (error) {
      if (!stopped.signal.aborted) problem.value = sentenceOf(error)
      return null
    }
    finally {
      sending.value = null
    }
  }

  return { sending, problem, send, stop: () => stopped?.abort() }
}

/** Fields first: the service knows what the picture is before it comes. */
function formOf(file: File, choice: Omit<ScanChoice, 'wedgeId'>): FormData {
  const form = new FormData()
  for (const [name, value] of Object.entries(choice)) if (value !== undefined) form.append(name, String(value))
  form.append('scan', file)
  return form
}
