interface Page<T> { items: T[], nextCursor: string | null }

/** A list of the service, page by page, with what went wrong beside it. `reload` takes again as many pages as stand. */
export function usePages<T extends { id: string }>(fetchPage: (cursor: string | undefined) => Promise<Page<T>>) {
  const items = shallowRef<T[]>([])
  const nextCursor = ref<string | null>(null)
  const isRead = ref(false)
  const error = ref<string | null>(null)
  let round = 0

  async function collect(enough: number): Promise<Page<T>> {
    const found: T[] = []
    let cursor: string | undefined
    do {
      const page = await fetchPage(cursor)
      found.push(...page.items)
      cursor = page.nextCursor ?? undefined
    } while (cursor && found.length < enough)
    return { items: found, nextCursor: cursor ?? null }
  }

  async function read(wanted: () => Promise<Page<T>>) {
    const mine = ++round
    try {
      const page = await wanted()
      if (mine !== round) return
      items.value = page.items
      nextCursor.value = page.nextCursor
      error.value = null
    }
    catch (problem) {
      if (mine === round) error.value = sentenceOf(problem)
    }
    isRead.value = true
  }

  const reload = () => read(() => collect(items.value.length))
  const more = () => read(async () => {
    const page = await fetchPage(nextCursor.value ?? undefined)
    return { items: [...items.value, ...page.items], nextCursor: page.nextCursor }
  })
  const readAll = () => read(() => collect(Infinity))

  return { items, nextCursor, isRead, error, reload, more, readAll }
}
