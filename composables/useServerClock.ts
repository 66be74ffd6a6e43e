import { useDocumentVisibility, useIntervalFn } from '@vueuse/core'
import { computed, onMounted, watch, type ComputedRef } from 'vue'
import { useClockStore } from '~/stores/clock'
import { ApiFailure } from '~/utils/api'

const renewEveryMs = 5 * 60_000

interface ServerClock {
  /** The server's present, epoch milliseconds. A plain call, not reactive: `useNow` ticks. */
  now: () => number
  /** Added to this machine's clock it gives the server's; null until it was measured. */
  offsetMs: ComputedRef<number | null>
  /** Measures again; a server that does not answer leaves the last offset standing. */
  renew: () => Promise<void>
}

/**
 * The one clock that everything is counted by: the server's. Measured when the page is ready, whenever it is seen
 * again, and every five minutes.
 */
export function useServerClock(): ServerClock {
  const store = useClockStore()
  const visibility = useDocumentVisibility()

  async function renew(): Promise<void> {
    try {
      await store.measureClock()
    } catch (error) {
      // The stream tells that the server stays away or refuses; the clock goes on by what it knows.
      if (!(error instanceof ApiFailure)) throw error
    }
  }

  onMounted(renew)
  useIntervalFn(renew, renewEveryMs)
  watch(visibility, (seen) => {
    if (seen === 'visible') return renew()
  })

  return { now: store.serverNow, offsetMs: computed(() => store.offsetMs), renew }
}
