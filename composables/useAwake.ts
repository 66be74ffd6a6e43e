import { useIntervalFn, useWakeLock } from '@vueuse/core'
import { computed, onMounted, ref, type ComputedRef } from 'vue'

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
  const { isSupported, isActive, request: ask } = useWakeLock()
  const refused = ref(false)

  async function request(): Promise<void> {
    if (!isSupported.value || document.visibilityState !== 'visible') return
    try {
      await ask('screen')
      refused.value = false
    } catch {
      // The machine saves power or the page may not: the wall says so, and it is asked again.
      refused.value = true
    }
  }

  onMounted(request)
  useIntervalFn(() => (isActive.value ? undefined : request()), renewEveryMs)

  const state = computed(() => {
    if (!isSupported.value) return 'unable'
    return isActive.value && !refused.value ? 'on' : 'off'
  })
  return { state, request }
}
