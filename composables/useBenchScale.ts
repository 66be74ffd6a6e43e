import { onScopeDispose, ref, type Ref } from 'vue'
import { keypadSource, type KeypadSource, type ScaleReading, type ScaleSourceState } from '#shared/utils/bench-scale'

interface BenchScaleUse {
  source: KeypadSource
  state: Ref<ScaleSourceState>
}

/**
 * The source of weights at this bench, connected while the caller lives.
 *
 * @param take gets every reading
 */
export function useBenchScale(take: (reading: ScaleReading) => void): BenchScaleUse {
  const source = keypadSource({
    now: () => Date.now(),
    after: (ms, call) => {
      const timer = setTimeout(call, ms)
      return () => clearTimeout(timer)
    },
  })
  const state = ref<ScaleSourceState>('connecting')
  source.readings(take)
  void source.connect().then(() => { state.value = source.state() })
  onScopeDispose(() => source.disconnect())
  return { source, state }
}
