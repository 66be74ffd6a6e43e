import { useDebounceFn } from '@vueuse/core'
import { onMounted, onScopeDispose, watch } from 'vue'
import type { LiveEvent } from '#shared/schemas/live'
import { useBenchStore } from '~/stores/bench'
import { LiveConnection } from '~/utils/live-connection'

/** What changes the lists that a bench works from. */
const listed = new Set(['lot', 'material', 'mix', 'shop'])

/** Changes that come together are read together. */
const PAUSE_MS = 200

/**
 * Reads the bench's lists anew when something on the shelf or in a recipe changes, so that a blocked lot is refused and
 * a new one offered at once. Belongs into the bench's page.
 */
export function useBenchNews(): void {
  const bench = useBenchStore()
  const read = useDebounceFn(() => bench.refresh(), PAUSE_MS)
  let isFirst = true

  const connection = new LiveConnection({
    async load() {
      // The page itself reads them at first.
      if (!isFirst) await bench.refresh()
      isFirst = false
    },
    open: () => new EventSource(`/api/events?${new URLSearchParams({ lastEventId: String(bench.snapshot?.lastSeq ?? 0) }).toString()}`),
    onEvent: (data) => { if (listed.has((JSON.parse(data) as LiveEvent).type)) void read() },
    onBeat: () => {},
    onStale: () => {},
    onFailure: () => {},
  })

  const stop = watch(() => bench.snapshot !== null, (isThere) => {
    if (isThere) connection.connect()
  })
  onMounted(() => { if (bench.snapshot !== null) connection.connect() })
  onScopeDispose(() => { stop(); connection.close() })
}
