import { useDocumentVisibility, useIntervalFn } from '@vueuse/core'
import { computed, onMounted, onScopeDispose, ref, shallowRef, watch, type ComputedRef } from 'vue'

/** A lock that the machine took away is asked for again after this long. */
const renewEveryMs = 30_000

interface Awake {
  /** `on`; `off` where the browser refuses or has lost it; `unable` where it cannot: only https and localhost can. */
  state: ComputedRef<'on' | 'off' | 'unable'>
  /** Asks now, from a touch: some browsers grant it only then. */
  request: () => Promise<void>
}

/** Keeps the screen from going dark for as long as the page lives, and takes the lock anew whenever it was lost. */
export function useAwake(): Awake {
  const isSupported = ref(false)
  const lock = shallowRef<WakeLockSentinel | null>(null)
  const visibility = useDocumentVisibility()
  let isGone = false

  async function take(): Promise<void> {
    const taken = await navigator.wakeLock.request('screen')
    if (isGone) return taken.release()
    taken.addEventListener('release', () => { if (lock.value === taken) lock.value = null })
    lock.value = taken
  }

  async function request(): Promise<void> {
    if (!isSupported.value || lock.value !== null || document.visibilityState !== 'visible') return
    try {
      await take()
    } catch {
      // The machine saves power or the page may not: without a lock the wall says so, and it is asked again.
    }
  }

  onMounted(() => {
    isSupported.value = 'wakeLock' in navigator
    return request()
  })
  watch(visibility, (seen) => { if (seen === 'visible') return request() })
  useIntervalFn(request, renewEveryMs)
  onScopeDispose(() => {
    isGone = true
    void lock.value?.release()
  })

  const state = computed(() => {
    if (!isSupported.value) return 'unable'
    return lock.value !== null ? 'on' : 'off'
  })
  return { state, request }
}
