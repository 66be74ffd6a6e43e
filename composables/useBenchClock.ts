import { useIntervalFn } from '@vueuse/core'
import { computed, ref, type ComputedRef } from 'vue'
import { useBenchStore } from '~/stores/bench'
import { clock } from '~/utils/format'

/** The server's time, ticking once a second for what is counted on the screen. */
export function useBenchClock(): { now: ComputedRef<number>, text: ComputedRef<string>, at: (ms: number) => string } {
  const bench = useBenchStore()
  const tick = ref(Date.now())
  useIntervalFn(() => { tick.value = Date.now() }, 1000)
  const now = computed(() => tick.value + (bench.offsetMs ?? 0))
  const at = (ms: number): string => clock(ms, bench.zone)
  return { now, text: computed(() => at(now.value)), at }
}
