import { contract } from '#build/client-contract'
import type { Photo } from '#shared/schemas/photos'
import type { Upload as StoredUpload } from '#shared/schemas/uploads'
import { fingerprintOfFile, mendsItself, sendResumably, type SendingHooks } from '~/utils/send-resumably'

type Queue = ReturnType<typeof usePhotoUploads> & { /** told of each photo that arrives while a page looks on */ hear?: (photo: Photo) => boolean }

/** One queue for a person in a studio, which outlives the pages that show it: one may walk about while photos are sent. */
const queues = new Map<string, Queue>()
const asksAgainMs = 2000

/** Photos on their way to this studio, those that were broken off among them, and those that wait for one’s word. */
export function useStudioUploads(onKept: (photo: Photo) => boolean) {
  const { call } = useApi()
  const { params, slug } = useStudioStore()
  const session = useSessionStore()
  const shared = ref<StoredUpload[]>([])

  const finish = (uploadId: string) => call(contract.finishUpload, { params: { ...params, upload: uploadId } })
  const giveUp = (uploadId: string) => call(contract.removeUpload, { params: { ...params, upload: uploadId }, headers: { 'tus-resumable': '1.0.0' } })

  async function send(file: File | null, begun: string | null, hooks: SendingHooks): Promise<Photo> {
    const uploadId = file ? await sendResumably(file, addressOf(contract.createUpload, params), begun, hooks) : begun!
    hooks.onShare(1)
    for (;;) {
      try {
        return await finish(uploadId)
      }
      catch (error) {
        if (!(error instanceof ApiError) || !mendsItself(error)) throw error
        hooks.signal.throwIfAborted()
        hooks.onCut()
        await new Promise(resolve => setTimeout(resolve, asksAgainMs))
        hooks.signal.throwIfAborted()
      }
    }
  }

  function openQueue(): Queue {
    const queue: Queue = usePhotoUploads({
      send, fingerprintOf: fingerprintOfFile,
      giveUp: uploadId => void giveUp(uploadId).catch(() => {}), // what stays is swept in its time
      onKept: photo => queue.hear?.(photo) ?? false,
    })
    return queue
  }

  const name = `${session.user?.id} ${slug}`
  const queue = queues.get(name) ?? openQueue()
  queues.set(name, queue)

  /** Asks the server what it holds: after a reload, the files have to be chosen again. */
  async function readStored() {
    const { items } = await call(contract.listUploads, { params, query: { limit: 100 } }).catch(() => ({ items: [] as StoredUpload[] }))
    shared.value = items.filter(item => item.origin === 'share-sheet' && item.receivedBytes === item.bytes)
    queue.refreshStored(items.filter(item => item.origin === 'screen'))
  }

  async function takeShared() {
    const taken = shared.value
    shared.value = []
    queue.takeUp(taken)
  }

  async function dropShared() {
    const dropped = shared.value
    shared.value = []
    await Promise.all(dropped.map(({ id }) => giveUp(id).catch(() => {})))
  }

  onMounted(() => {
    queue.hear = onKept
    void readStored()
  })
  onUnmounted(() => {
    if (queue.hear === onKept) queue.hear = undefined
  })

  return { ...queue, shared, takeShared, dropShared }
}
