import { contract } from '#build/client-contract'
import type { Negative } from '#shared/schemas/negatives'

/** What a person can change about a negative. `crop: null` takes the largest centred one. */
export type Settings = Pick<Negative, 'name' | 'size' | 'fit' | 'quarterTurns' | 'straightenDegrees' | 'pixelsPerInch' | 'mirror' | 'aim' | 'adjustments' | 'margin' | 'marks' | 'benchId'>
  & { curveId: string, crop: Negative['crop'] | null }

const keys = ['name', 'size', 'fit', 'crop', 'quarterTurns', 'straightenDegrees', 'pixelsPerInch', 'mirror', 'aim', 'adjustments', 'margin', 'marks', 'benchId', 'curveId'] as const
const keepAfterMilliseconds = 500
const sameStepMilliseconds = 800

const settingsOf = (negative: Negative): Settings => copy(Object.fromEntries(keys.map(key => [key, negative[key]])) as unknown as Settings)
const copy = <T>(value: T): T => JSON.parse(JSON.stringify(value)) as T
const isSame = (a: unknown, b: unknown) => JSON.stringify(a) === JSON.stringify(b)
const changesBetween = (from: Settings, to: Settings): Partial<Settings> => copy(Object.fromEntries(keys.filter(key => !isSame(from[key], to[key])).map(key => [key, to[key]])))

/**
 * A negative being worked on: what is on the screen at once, kept on the server a moment later, with undo and redo.
 * When somebody else has changed it meanwhile, their change is taken over and one's own put on top, and the page says so.
 */
export function useNegativeEditor(id: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = { ...studio.params, negative: id }
  const stored = shallowRef<Negative | null>(null)
  const draft = ref<Settings | null>(null)
  const keeping = ref<'kept' | 'waiting' | 'keeping' | 'failed'>('kept')
  const keptAt = ref<Date | null>(null)
  const problem = ref<string | null>(null)
  /** the fields that another change had touched too, and how they stood there */
  const overtaken = shallowRef<Partial<Settings> | null>(null)
  const { remember, takeBack, takeAgain, canUndo, canRedo } = useSteps(draft)

  async function load() {
    stored.value = await call(contract.negative, { params })
    draft.value = settingsOf(stored.value)
  }

  let timer: ReturnType<typeof setTimeout> | undefined
  /** Changes the draft at once; steps of one group that follow quickly are one step for undo. */
  function change(patch: Partial<Settings>, group = Object.keys(patch).join()) {
    if (!draft.value) return
    remember(group)
    Object.assign(draft.value, copy(patch))
    keepSoon()
  }

  function keepSoon() {
    keeping.value = 'waiting'
    clearTimeout(timer)
    timer = setTimeout(keep, keepAfterMilliseconds)
  }

  let running: Promise<void> | undefined
  /** Resolves once everything on the screen is kept; throws nothing, `problem` says what went wrong. */
  function keep(): Promise<void> {
    clearTimeout(timer)
    return running ??= sendChanges().finally(() => running = undefined)
  }

  async function sendChanges() {
    problem.value = null
    while (stored.value && draft.value) {
      const base = settingsOf(stored.value)
      const sent = copy(draft.value)
      const patch = changesBetween(base, sent)
      if (Object.keys(patch).length === 0) break
      keeping.value = 'keeping'
      try {
        takeOver(await call(contract.changeNegative, { params, body: { ...patch, revision: stored.value.revision } }), sent)
      }
      catch (error) {
        if (error instanceof ApiError && error.code === 'stale_revision') await putOnTop(base)
        else {
          problem.value = sentenceOf(error)
          keeping.value = 'failed'
          return
        }
      }
    }
    keeping.value = 'kept'
    keptAt.value = new Date()
  }

  /** What the server has resolved (a crop, a bench's curve) replaces what was sent, but not what was changed meanwhile. */
  function takeOver(answer: Negative, sent: Settings) {
    const later = changesBetween(sent, draft.value!)
    stored.value = answer
    draft.value = { ...settingsOf(answer), ...later }
  }

  async function putOnTop(base: Settings) {
    const mine = changesBetween(base, draft.value!)
    stored.value = await call(contract.negative, { params })
    const theirs = settingsOf(stored.value)
    const touchedByBoth = changesBetween(base, theirs)
    overtaken.value = Object.fromEntries(Object.entries(touchedByBoth).filter(([key]) => key in mine)) as Partial<Settings>
    draft.value = { ...theirs, ...mine }
  }

  function takeTheirs() {
    if (overtaken.value && draft.value) change(overtaken.value)
    overtaken.value = null
  }

  /** A change made elsewhere is shown, unless one's own work is on its way. */
  useHints(['negatives'], async (hint) => {
    if (hint !== 'resync' && hint.id !== id) return
    if (!stored.value || keeping.value !== 'kept' || (hint !== 'resync' && hint.revision <= stored.value.revision)) return
    await load().catch(() => {})
  })
  onScopeDispose(() => void keep())

  const undo = () => takeBack() && keepSoon()
  const redo = () => takeAgain() && keepSoon()

  return { stored, draft, keeping, keptAt, problem, overtaken, load, change, keep, takeTheirs, undo, redo, canUndo, canRedo }
}

/** Undo and redo as whole settings; a group of quick changes is one step. */
function useSteps(draft: Ref<Settings | null>) {
  const before = ref<string[]>([])
  const after = ref<string[]>([])
  let last = { group: '', at: 0 }

  function remember(group: string) {
    const now = Date.now()
    if (last.group !== group || now - last.at > sameStepMilliseconds) before.value.push(JSON.stringify(draft.value))
    last = { group, at: now }
    after.value = []
  }

  function move(from: Ref<string[]>, to: Ref<string[]>): boolean {
    const step = from.value.pop()
    if (step === undefined) return false
    to.value.push(JSON.stringify(draft.value))
    draft.value = JSON.parse(step) as Settings
    last = { group: '', at: 0 }
    return true
  }

  return {
    remember,
    takeBack: () => move(before, after),
    takeAgain: () => move(after, before),
    canUndo: computed(() => before.value.length > 0),
    canRedo: computed(() => after.value.length > 0),
  }
}
