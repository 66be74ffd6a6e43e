import { useDocumentVisibility } from '@vueuse/core'
import { onMounted, onScopeDispose, readonly, ref, watch, type Ref } from 'vue'
import { useClockStore } from '~/stores/clock'

/**
 * The server's present in epoch milliseconds, renewed at the beginning of each of its seconds, so that all counts of
 * all screens change together. It is an instant and never a count of ticks: after sleep it is right at once.
 *
 * @param everyMs how often it is renewed, a divisor of a second or whole seconds
 */
export function useNow(everyMs = 1_000): Readonly<Ref<number>> {
  const store = useClockStore()
  const visibility = useDocumentVisibility()
  const now = ref(store.serverNow())
  let timer: ReturnType<typeof setTimeout> | undefined

  function tick(): void {
    clearTimeout(timer)
    now.value = store.serverNow()
    timer = setTimeout(tick, everyMs - (now.value % everyMs))
  }

  onMounted(tick)
  watch(visibility, (seen) => {
    if (seen === 'visible') tick()
  })
  watch(() => store.offsetMs, tick, { flush: 'post' })
  onScopeDispose(() => clearTimeout(timer))
  return readonly(now)
}
