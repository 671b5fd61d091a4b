import { contract } from '#build/client-contract'
import type { Curve } from '#shared/schemas/curves'
import type { Photo } from '#shared/schemas/photos'
import type { useNegativeEditor } from '~/composables/useNegativeEditor'
import type { PreviewOrder } from '~/composables/preview/engine'
import { innerOf } from '~/utils/crop-choice'

/**
 * Keeps the triptych in step with a negative that is worked on. Tones follow the draft without any request;
 * another part, turn or size of the picture is fetched once it is kept, since the server resolves it.
 */
export function useNegativePreview(editor: ReturnType<typeof useNegativeEditor>, photo: Readonly<Ref<Photo | null>>) {
  const { call } = useApi()
  const studio = useStudioStore()
  const { theme } = usePreferences()
  const { stored, draft } = editor
  const preview = usePreview()
  const whole = useProxy()
  const detail = useProxy()
  const problem = ref<string | null>(null)
  const curve = shallowRef<Curve | null>(null)
  const picture = shallowRef<ProxyPicture | null>(null)
  /** the middle of what is shown at the film's own pixels, in fractions of the picture; null shows the whole */
  const closeUp = ref<{ x: number, y: number } | null>(null)

  const printShape = computed(() => stored.value ? stored.value.size.widthMm / stored.value.size.heightMm : 1)
  const turn = computed(() => ({ quarterTurns: stored.value?.quarterTurns ?? 0, straightenDegrees: stored.value?.straightenDegrees ?? 0 }))
  const inner = computed(() => stored.value?.fit === 'contain' && photo.value && !closeUp.value ? innerOf(photo.value, turn.value, stored.value.crop, printShape.value) : undefined)
  const geometryKey = computed(() => stored.value && photo.value && JSON.stringify([stored.value.crop, turn.value, printShape.value, stored.value.fit]))

  watch(() => stored.value?.curve.id, async (id) => {
    if (id) await attempt(async () => curve.value = await call(contract.curve, { params: { ...studio.params, curve: id } }))
  })

  watch(geometryKey, async (key) => {
    if (!key || !stored.value || !photo.value) return
    closeUp.value = null
    const { width, height } = inner.value ?? { width: 1, height: 1 }
    const size = previewSize(printShape.value * width / height)
    await attempt(async () => {
      const fetched = await whole.fetchProxy(photo.value!.id, { ...turn.value, crop: stored.value!.crop }, size.width, size.height)
      if (!fetched) return
      picture.value = { ...fetched, channels: fetched.channels.slice(0) }
      preview.setSource(fetched)
    })
  })

  const order = computed<PreviewOrder | null>(() => curve.value && draft.value && {
    adjustments: draft.value.adjustments, aim: draft.value.aim, response: curve.value.response,
    process: stored.value!.process, colourPath: curve.value.colourPath, mirror: draft.value.mirror, dim: theme.value === 'dim',
  })
  watch(order, next => next && preview.setOrder(next))

  /** Shows the film's own pixels around a place, one on one screen pixel; null shows the whole again. */
  async function lookAt(place: { x: number, y: number } | null, screen: { width: number, height: number }) {
    closeUp.value = place
    if (!place || !stored.value || !photo.value) return preview.show('whole')
    const { crop, film, margin, pixelsPerInch } = stored.value
    const pictureWidth = film.widthPixels - 2 * Math.round(margin.mm / 25.4 * pixelsPerInch)
    const pictureHeight = film.heightPixels - 2 * Math.round(margin.mm / 25.4 * pixelsPerInch)
    const part = { width: Math.min(1, screen.width / pictureWidth), height: Math.min(1, screen.height / pictureHeight) }
    const start = (middle: number, share: number) => Math.min(1 - share, Math.max(0, middle - share / 2))
    const region = { x: crop.x + start(place.x, part.width) * crop.width, y: crop.y + start(place.y, part.height) * crop.height, width: part.width * crop.width, height: part.height * crop.height }
    await attempt(async () => {
      const fetched = await detail.fetchProxy(photo.value!.id, { ...turn.value, crop: region }, Math.round(part.width * pictureWidth), Math.round(part.height * pictureHeight))
      if (fetched && closeUp.value) preview.setSource(fetched, 'detail')
    })
  }

  async function attempt(work: () => Promise<unknown>) {
    try {
      await work()
      problem.value = null
    }
    catch (error) {
      problem.value = sentenceOf(error)
    }
  }

  return { preview, order, picture, curve, printShape, inner, closeUp, lookAt, problem }
}
