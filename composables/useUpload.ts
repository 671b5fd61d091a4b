import { contract } from '#build/client-contract'
import type { Photo } from '#shared/schemas/photos'

/** Sends photos, telling how far it is. One upload at a time. */
export function useUpload() {
  const studio = useStudioStore()
  const progress = ref<number | null>(null)
  const count = ref(0)
  const problem = ref<string | null>(null)
  const says = computed(() => {
    if (progress.value === null) return ''
    const what = count.value === 1 ? 'the photo' : `${count.value} photos`
    return progress.value < 1 ? `Sending ${what}, ${Math.round(progress.value * 100)} %` : 'Looking at the picture'
  })

  async function upload(files: File[]): Promise<Photo[]> {
    if (files.length === 0 || progress.value !== null) return []
    problem.value = null
    count.value = files.length
    progress.value = 0
    try {
      return (await uploadFiles(contract.uploadPhotos, studio.params, files, share => progress.value = share)).items
    }
    catch (error) {
      problem.value = sentenceOf(error)
      return []
    }
    finally {
      progress.value = null
    }
  }

  return { progress, says, problem, upload }
}
