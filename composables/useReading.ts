import { contract } from '#build/client-contract'
import type { z } from 'zod'
import type { Reading } from '#shared/schemas/curves'
import type { readAgainBody } from '#shared/schemas/scans'
import type { Wedge } from '#shared/schemas/wedges'

const pollMilliseconds = 1500

/** One reading, followed until it is ready or has failed, with the wedge that it is of. */
export function useReading(id: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, reading: id }
  const reading = shallowRef<Reading | null>(null)
  const wedge = shallowRef<Wedge | null>(null)
  const error = ref<string | null>(null)
  const isOpen = computed(() => reading.value?.state === 'waiting' || reading.value?.state === 'making')

  const reload = async () => (error.value = await sentenceIfFailed(async () => {
    reading.value = await call(contract.reading, { params })
    const { wedgeId } = reading.value
    if (wedgeId && wedge.value?.id !== wedgeId) wedge.value = await call(contract.wedge, { params: { ...studio.params, wedge: wedgeId } })
  }))
  useHints(['readings'], hint => (hint === 'resync' || hint.id === id) && reload())
  // Hints tell at once; the beat is for a stream that is interrupted.
  let beat: ReturnType<typeof setInterval> | undefined
  onMounted(() => (beat = setInterval(() => isOpen.value && reload(), pollMilliseconds)))
  onBeforeUnmount(() => clearInterval(beat))

  const readAgain = async (body: z.input<typeof readAgainBody>) => (reading.value = await call(contract.readAgain, { params, body }))
  const remove = () => call(contract.deleteReading, { params })
  /** The picture that was handed in, upright, so many pixels wide at most. */
  const pictureAddress = (width: number) => addressOf(contract.readingPicture, params, { width })

  return { reading, wedge, error, isOpen, reload, readAgain, remove, pictureAddress }
}
