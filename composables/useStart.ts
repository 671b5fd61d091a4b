import { v7 as uuidv7 } from 'uuid'
import { contract } from '#build/client-contract'
import { starterResponse } from '#shared/calibration/starter'
import type { Bench, Process } from '#shared/schemas/benches'
import type { Curve } from '#shared/schemas/curves'
import type { Adjustments, Negative } from '#shared/schemas/negatives'
import type { Photo } from '#shared/schemas/photos'
import { largestCrop } from '#shared/sheet/crop'
import type { SizeMm } from '#shared/sheet/sizes'
import { neutralMix } from '#shared/tone/mix'

/** What decides the tones: a bench with its curve, or a process with its uncalibrated starting curve. */
export type ToneSource = { kind: 'bench', bench: Bench } | { kind: 'process', process: Process }
export type CurveInUse = Pick<Curve, 'response' | 'aim' | 'calibrated' | 'colourPath'>

export const neutral = (): Adjustments => ({ mix: { ...neutralMix }, blackPoint: 0, whitePoint: 1, midtone: 0, contrast: 0 })

/** Black and white point at the picture's own ends, to three decimals, so that its tones use the whole print. */
export function pointsAt([low, high]: readonly [number, number]): Adjustments {
  const [blackPoint, whitePoint] = [Math.min(0.9, Math.floor(low * 1000) / 1000), Math.max(0.1, Math.ceil(high * 1000) / 1000)]
  return whitePoint - blackPoint < 0.05 ? neutral() : { ...neutral(), blackPoint, whitePoint }
}

/** The four decisions of Start, and the negative that comes of them. */
export function useStart() {
  const { call } = useApi()
  const studio = useStudioStore()
  const photo = shallowRef<Photo | null>(null)
  const source = shallowRef<ToneSource>({ kind: 'process', process: 'cyanotype' })
  const curve = shallowRef<CurveInUse | null>(null)
  const size = ref<SizeMm>({ widthMm: 180, heightMm: 135 })
  const isFinished = ref(false)
  const pictureEnds = shallowRef<readonly [number, number]>([0, 1])
  const problem = ref<string | null>(null)

  const process = computed(() => source.value.kind === 'bench' ? source.value.bench.process : source.value.process)
  const adjustments = computed(() => isFinished.value ? neutral() : pointsAt(pictureEnds.value))
  const shape = computed(() => size.value.widthMm / size.value.heightMm)
  const crop = computed(() => photo.value && largestCrop(photo.value, { quarterTurns: 0, straightenDegrees: 0 }, shape.value))

  const startingCurve = (name: Process): CurveInUse => ({ response: starterResponse(name).response, aim: 'even-lightness', calibrated: false, colourPath: null })

  async function curveOf(bench: Bench): Promise<CurveInUse> {
    if (!bench.curveInUse) throw new ApiError(422, 'no_curve', 'This bench has no curve in use yet. Put one in use, or take the process’s starting curve.')
    return call(contract.curve, { params: { ...studio.params, curve: bench.curveInUse.id } })
  }

  watch(source, async (chosen) => {
    problem.value = null
    try {
      const next = chosen.kind === 'process' ? startingCurve(chosen.process) : await curveOf(chosen.bench)
      if (source.value === chosen) curve.value = next
    }
    catch (error) {
      curve.value = null
      problem.value = sentenceOf(error)
    }
  }, { immediate: true })

  let made: { key: string, negative: Negative } | undefined

  /** The negative of the present decisions; asked again unchanged, the same one. */
  async function make(): Promise<Negative> {
    const chosen = source.value
    const order = {
      photoId: photo.value!.id,
      ...chosen.kind === 'bench' ? { benchId: chosen.bench.id } : { process: chosen.process },
      size: { ...size.value }, adjustments: adjustments.value,
    }
    const key = JSON.stringify(order)
    if (made?.key !== key) made = { key, negative: await call(contract.createNegative, { params: studio.params, body: { id: uuidv7(), ...order } }) }
    return made.negative
  }

  return { photo, source, process, curve, size, shape, crop, isFinished, adjustments, pictureEnds, problem, make }
}
