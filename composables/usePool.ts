import { countPrints, defaultPool, isChosen, poolEntries, withEntry, type PoolReading } from '~/utils/pool'

/** A bench's readings by wedge print, and which prints go into the next curve. Prints that come later go in as they would have at first. */
export function usePool(readings: Readonly<Ref<PoolReading[]>>) {
  const entries = computed(() => poolEntries(readings.value))
  const chosen = ref(defaultPool(entries.value))
  watch(entries, (now, before) => {
    const usual = defaultPool(now)
    for (const entry of now) {
      const earlier = before.find(other => other.key === entry.key)
      const isIn = earlier && defaultPool([earlier]).length ? isChosen(earlier, chosen.value) : isChosen(entry, usual)
      chosen.value = withEntry(chosen.value, entry, isIn)
    }
  })
  return { entries, chosen, count: computed(() => countPrints(entries.value, chosen.value)) }
}
