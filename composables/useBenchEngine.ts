import { ref, shallowRef, type Ref, type ShallowRef } from 'vue'

type BenchEngine = typeof import('#shared/utils/bench-engine').benchEngine

interface BenchEngineUse {
  /** Null until it was fetched: then no figures stand. */
  engine: ShallowRef<BenchEngine | null>
  /** The last try did not get it. */
  isMissing: Ref<boolean>
  /** @throws where the network does not give it; a next call tries again */
  fetchEngine: () => Promise<BenchEngine>
  /** As {@link fetchEngine}, answering whether it is here. */
  hasEngine: () => Promise<boolean>
}

/** What reckons, fetched once it is needed or the page has nothing to do. */
export function useBenchEngine(): BenchEngineUse {
  const engine = shallowRef<BenchEngine | null>(null)
  const isMissing = ref(false)

  async function fetchEngine(): Promise<BenchEngine> {
    if (engine.value !== null) return engine.value
    try {
      const { benchEngine } = await import('#shared/utils/bench-engine')
      engine.value = benchEngine
      isMissing.value = false
      return benchEngine
    } catch (error) {
      isMissing.value = true
      throw error
    }
  }

  return { engine, isMissing, fetchEngine, hasEngine: () => fetchEngine().then(() => true, () => false) }
}
