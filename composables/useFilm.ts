import { contract } from '#build/client-contract'
import type { FilmFormat, Negative } from '#shared/schemas/negatives'

export type Render = Negative['renders'][number]
/** Films are made of negatives and of wedges. */
export type FilmKind = 'negatives' | 'wedges'
const pollMilliseconds = 1500

/** Has a film file made, follows its progress, and hands it over once it is ready. */
export function useFilm(kind: FilmKind = 'negatives') {
  const source = kind === 'negatives' ? useNegativeFilms() : useWedgeFilms()
  const render = shallowRef<Render | null>(null)
  const problem = ref<string | null>(null)
  const isMaking = computed(() => render.value?.state === 'waiting' || render.value?.state === 'making')
  let wake: (() => void) | undefined
  let isOver = false
  useHints(['renders', kind], () => wake?.())
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
  async function download(id: string, format: FilmFormat): Promise<boolean> {
    problem.value = null
    try {
      render.value = await source.ask(id, format)
      while (isMaking.value && !isOver) {
        await aWhile()
        render.value = (await source.rendersOf(id)).find(one => one.format === format) ?? render.value
      }
      if (isOver) return false
      if (render.value?.state === 'failed') throw new ApiError(503, 'image_child_failed', render.value.error?.message ?? 'This film could not be made.')
      handOver(source.address(id, format))
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

interface FilmSource {
  /** Has it made; null when the file lies there already. */
  ask: (id: string, format: FilmFormat) => Promise<Render | null>
  rendersOf: (id: string) => Promise<Render[]>
  address: (id: string, format: FilmFormat) => string
}

function useNegativeFilms(): FilmSource {
  const { call } = useApi()
  const studio = useStudioStore()
  const paramsOf = (negative: string) => ({ ...studio.params, negative })
  return {
    ask: (id, format) => call(contract.makeRender, { params: paramsOf(id), body: { format } }),
    rendersOf: async id => (await call(contract.negative, { params: paramsOf(id) })).renders,
    address: (id, format) => addressOf(contract.negativeFile, paramsOf(id), { format }),
  }
}

function useWedgeFilms(): FilmSource {
  const { call } = useApi()
  const studio = useStudioStore()
  const paramsOf = (wedge: string) => ({ ...studio.params, wedge })
  const rendersOf = async (id: string) => (await call(contract.wedge, { params: paramsOf(id) })).renders
  const address = (id: string, format: FilmFormat) => addressOf(contract.wedgeFile, paramsOf(id), { format })
  return {
    async ask(id, format) {
      // Asking for the file has it made; only its head, because the browser fetches the file itself afterwards.
      const answer = await fetch(address(id, format), { method: 'HEAD' }).catch(() => {
        throw unreachable()
      })
      if (answer.status === 200) return null
      if (answer.ok) return (await rendersOf(id)).find(one => one.format === format) ?? null
      await call(contract.wedgeFile, { params: paramsOf(id), query: { format } }) // tells in words what is wrong
      return null
    },
    rendersOf, address,
  }
}

function handOver(address: string) {
  const link = document.createElement('a')
  link.href = address
  link.download = ''
  link.click()
}
