import { countPrints, defaultPool, isChosen, poolEntries, readyIds, type PoolEntry, type PoolReading, type PoolWedge } from '~/utils/pool'

/** A bench's readings by wedge print, and which prints go into the next curve. Prints that come later go in as they would have at first. */
export function usePool(readings: Readonly<Ref<PoolReading[]>>, wedges: Readonly<Ref<PoolWedge[]>> = ref([])) {
  const entries = computed(() => poolEntries(readings.value, wedges.value))
  const chosen = ref(defaultPool(entries.value))
  watch(entries, (now, before) => {
    const usual = defaultPool(now)
    const isIn = (entry: PoolEntry) => {
      const earlier = before.find(other => other.key === entry.key)
      return earlier && readyIds(earlier).length ? isChosen(earlier, chosen.value) : isChosen(entry, usual)
    }
    chosen.value = now.filter(isIn).flatMap(readyIds)
  })
  return { entries, chosen, count: computed(() => countPrints(entries.value, chosen.value)) }
}
