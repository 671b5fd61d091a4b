import { contract } from '#build/client-contract'
import type { FilmFormat, Negative } from '#shared/schemas/negatives'

type Render = Negative['renders'][number]
const pollMilliseconds = 1500

/** Has a negative's film file made, follows its progress, and hands it over once it is ready. */
export function useFilm() {
  const { call } = useApi()
  const studio = useStudioStore()
  const render = shallowRef<Render | null>(null)
  const problem = ref<string | null>(null)
  const isMaking = computed(() => render.value?.state === 'waiting' || render.value?.state === 'making')
  let wake: (() => void) | undefined
  let isOver = false
  useHints(['renders', 'negatives'], () => wake?.())
  onScopeDispose(() => {
    isOver = true
    wake?.()
  })
  /** until a hint comes, or for a while when none does */
  const aWhile = () => new Promise<void>((resolve) => {
    const late = setTimeout(resolve, pollMilliseconds)
    wake = () => (clearTimeout(late), resolve())
  })

  /** Resolves when the file has been handed to the browser; false when it could not be made. */
  async function download(negative: string, format: FilmFormat): Promise<boolean> {
    problem.value = null
    const params = { ...studio.params, negative }
    try {
      render.value = await call(contract.makeRender, { params, body: { format } })
      while (isMaking.value && !isOver) {
        await aWhile()
        render.value = (await call(contract.negative, { params })).renders.find(one => one.format === format) ?? render.value
      }
      if (isOver) return false
      if (render.value.state === 'failed') throw new ApiError(503, 'image_child_failed', render.value.error?.message ?? 'This film could not be made.')
      handOver(addressOf(contract.negativeFile, params, { format }))
      return true
    }
    catch (error) {
      problem.value = sentenceOf(error)
      render.value = null
      return false
    }
  }

  function forget() {
    render.value = null
    problem.value = null
  }

  return { render, problem, isMaking, download, forget }
}

function handOver(address: string) {
  const link = document.createElement('a')
  link.href = address
  link.download = ''
  link.click()
}
