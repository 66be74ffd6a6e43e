import type { Ref } from 'vue'
import { fetchBenchParts } from '~/utils/bench-parts'

interface BenchPartsUse {
  /** Everything that a pot needs up to the log is on this tablet: it can be mixed without a network. */
  isHere: Ref<boolean>
  /** Fetches what is missing. @throws where the network does not give it */
  fetchAll: () => Promise<void>
}

/** What the bench shows after the set-up is fetched apart from its first load; a pot begins only once all of it is there. */
export function useBenchParts(): BenchPartsUse {
  const isHere = useState('bench-parts', () => false)
  return {
    isHere,
    fetchAll: async () => {
      if (isHere.value) return
      await fetchBenchParts()
      isHere.value = true
    },
  }
}
