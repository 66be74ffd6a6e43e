import { computed, type ComputedRef } from 'vue'
import { useNow } from '~/composables/useNow'
import { useBenchStore } from '~/stores/bench'
import { clock } from '~/utils/format'

/** The one clock of all screens, for what is counted at the bench; `at` spells an instant as the shop's clock time. */
export function useBenchClock(): { now: ComputedRef<number>, text: ComputedRef<string>, at: (ms: number) => string } {
  const bench = useBenchStore()
  const tick = useNow()
  const now = computed(() => tick.value + bench.startOffsetMs)
  const at = (ms: number): string => clock(ms, bench.zone)
  return { now, text: computed(() => at(now.value)), at }
}
