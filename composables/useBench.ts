import { contract } from '#build/client-contract'
import type { z } from 'zod'
import type { Bench, benchPatch } from '#shared/schemas/benches'
import type { Aim, Curve, curveBrief, Reading } from '#shared/schemas/curves'
import { readingFileOf } from '~/utils/reading-file'

export type CurveBrief = z.infer<typeof curveBrief>
export interface ReadingZero { zero?: 'absolute' | 'paper', paperLightness?: number }

/** A bench with what is known about it: readings, curve versions, and the version that is shown. */
export function useBench(id: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, bench: id }
  const bench = shallowRef<Bench | null>(null)
  const curve = shallowRef<Curve | null>(null)
  const shownCurveId = ref<string | null>(null)
  const error = ref<string | null>(null)
  const readings = usePages<Reading>(cursor => call(contract.listReadings, { params, query: { cursor, limit: 100 } }))
  const curves = usePages<CurveBrief>(cursor => call(contract.listCurves, { params, query: { cursor, limit: 100 } }))

  const curveAddress = (curveId: string) => ({ ...studio.params, curve: curveId })

  async function readShownCurve() {
    const wanted = shownCurveId.value
    const answer = wanted ? await call(contract.curve, { params: curveAddress(wanted) }) : null
    if (wanted === shownCurveId.value) curve.value = answer
  }

  async function reload() {
    error.value = await sentenceIfFailed(async () => {
      const [answer] = await Promise.all([call(contract.bench, { params }), readings.readAll(), curves.readAll()])
      bench.value = answer
      shownCurveId.value ??= answer.curveInUse?.id ?? curves.items.value[0]?.id ?? null
      await readShownCurve()
    })
  }
  watch(shownCurveId, async () => (error.value = await sentenceIfFailed(readShownCurve)))
  useHints(['benches', 'readings', 'curves'], reload)

  async function fit(readingIds: string[], aim: Aim) {
    const draft = await call(contract.createCurve, { params, body: { readingIds, aim } })
    shownCurveId.value = draft.id
    await reload()
  }

  async function use(curveId: string) {
    await call(contract.useCurve, { params: curveAddress(curveId) })
    await reload()
  }

  async function retire(curveId: string) {
    await call(contract.retireCurve, { params: curveAddress(curveId) })
    await reload()
  }

  async function note({ id: curveId, revision }: Pick<Curve, 'id' | 'revision'>, notes: string) {
    const changed = await call(contract.changeCurve, { params: curveAddress(curveId), body: { notes, revision } })
    if (shownCurveId.value === changed.id) curve.value = changed
  }

  async function change(body: z.input<typeof benchPatch>) {
    bench.value = await call(contract.changeBench, { params, body })
  }

  async function archive() {
    await call(contract.archiveBench, { params, body: { revision: bench.value!.revision } })
  }

  const keepReading = (body: { unit: 'lightness' | 'density' | 'reflectance', values: { level: number, value: number }[] } & ReadingZero) =>
    call(contract.createReading, { params, body })

  /** A file goes to the service as it is; the service knows its columns. */
  async function importReading(file: File, zero: ReadingZero): Promise<Reading> {
    const { type, text } = readingFileOf(await file.text())
    const address = addressOf(contract.createReading, params, type === 'application/json' ? {} : zero)
    const answer = await fetch(address, { method: 'POST', headers: { 'content-type': type }, body: text }).catch(() => {
      throw unreachable()
    })
    if (!answer.ok) throw await apiErrorFrom(answer)
    return await answer.json()
  }

  return { bench, curve, shownCurveId, readings, curves, error, reload, fit, use, retire, note, change, archive, keepReading, importReading }
}
