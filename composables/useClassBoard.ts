import { contract } from '#build/client-contract'
import type { ClassBoard } from '#shared/schemas/classes'

/** A class and its students, live; what the teacher does to them, with what can be taken back. */
export function useClassBoard(id: string) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = () => ({ ...studio.params, class: id })
  const board = shallowRef<ClassBoard | null>(null)
  const problem = ref<string | null>(null)
  const isBusy = ref(false)
  const undoable = shallowRef<{ says: string, undo: () => Promise<unknown> } | null>(null)

  const read = async () => (board.value = await call(contract.classBoard, { params: params() }))
  const load = async () => (problem.value = await sentenceIfFailed(read))
  useHints(['classes'], hint => (hint === 'resync' || hint.id === id) && load())

  async function attempt(work: () => Promise<unknown>): Promise<boolean> {
    isBusy.value = true
    undoable.value = null
    problem.value = await sentenceIfFailed(async () => {
      await work()
      await read()
    })
    isBusy.value = false
    return problem.value === null
  }

  type Changes = { name?: string, endsAt?: string, joiningOpen?: boolean }
  const change = (changes: Changes) => attempt(() => call(contract.changeClass, { params: params(), body: { revision: board.value!.revision, ...changes } }))
  const renewRoomCode = () => attempt(() => call(contract.renewRoomCode, { params: params() }))

  async function endNow() {
    const before = board.value!.endsAt
    if (await change({ endsAt: 'now' })) undoable.value = { says: 'The class is over.', undo: () => change({ endsAt: before }) }
  }

  const ofStudent = (student: string) => ({ ...params(), student })
  const restore = (student: string) => attempt(() => call(contract.restoreStudent, { params: ofStudent(student) }))
  async function remove(student: string, name: string) {
    if (await attempt(() => call(contract.removeStudent, { params: ofStudent(student) }))) undoable.value = { says: `${name} is out of the class.`, undo: () => restore(student) }
  }

  /** The code is in this answer and nowhere else. */
  async function renewPersonalCode(student: string): Promise<string | null> {
    let code: string | null = null
    await attempt(async () => (code = (await call(contract.renewPersonalCode, { params: ofStudent(student) })).personalCode))
    return code
  }

  return { board, problem, isBusy, undoable, load, change, renewRoomCode, endNow, remove, restore, renewPersonalCode }
}
