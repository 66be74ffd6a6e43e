import { useIntervalFn } from '@vueuse/core'
import { readonly, watch, type Ref } from 'vue'
import { useServerClock } from '~/composables/useServerClock'
import { useClockStore } from '~/stores/clock'

const renewEveryMs = 30_000

/**
 * The present for what is written in dates and minutes, epoch milliseconds by the server's clock. At first the moment at
 * which the server drew the page, so that both sides draw the same words; then it goes on, whatever this machine's own
 * clock says.
 */
export function useShopNow(): Readonly<Ref<number>> {
  const store = useClockStore()
  const now = useState('drawn-at', () => Date.now())
  useServerClock()

  function tick(): void {
    if (store.offsetMs !== null) now.value = store.serverNow()
  }

  // What is opened later in a page must not begin with the moment at which that page was drawn.
  if (import.meta.client && useNuxtApp().isHydrating !== true) tick()
  watch(() => store.offsetMs, tick)
  useIntervalFn(tick, renewEveryMs)
  return readonly(now)
}
