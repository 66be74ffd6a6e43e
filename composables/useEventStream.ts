import { useDocumentVisibility, useEventListener } from '@vueuse/core'
import { computed, onMounted, onScopeDispose, readonly, ref, toValue, watch, type ComputedRef, type MaybeRefOrGetter, type Ref } from 'vue'
import type { LiveBeat, LiveEvent } from '#shared/schemas/live'
import { useServerClock } from '~/composables/useServerClock'
import { useTimersStore, type Connection } from '~/stores/timers'
import { ApiFailure } from '~/utils/api'
import { LiveConnection } from '~/utils/live-connection'

interface EventStream {
  connection: ComputedRef<Connection>
  /** True while the server says that this browser may not listen: signed out, or no screen any more. */
  refused: Readonly<Ref<boolean>>
}

/**
 * Keeps the timers store as the server knows it, for as long as the page lives: a snapshot, then events, and both anew
 * after every break. Belongs into one component of a page.
 *
 * @param boothId the booth to follow, or null for the whole shop; a booth's screen follows its own whatever is asked
 */
export function useEventStream(boothId: MaybeRefOrGetter<string | null> = null): EventStream {
  const store = useTimersStore()
  const clock = useServerClock()
  const visibility = useDocumentVisibility()
  const refused = ref(false)

  function open(): EventSource {
    const query = new URLSearchParams({ lastEventId: String(store.lastSeq) })
    const booth = toValue(boothId)
    if (booth !== null) query.set('boothId', booth)
    return new EventSource(`/api/events?${query.toString()}`)
  }

  async function load(): Promise<void> {
    await store.loadSnapshot(toValue(boothId))
    refused.value = false
    void clock.renew()
  }

  /** Clocks that have come apart are measured anew. */
  function heed(jumped: boolean): void {
    if (jumped) void clock.renew()
  }

  function hear(event: LiveEvent): void {
    heed(store.hearEvent(event))
    // Booths, guns and names stand in the snapshot alone; they change rarely.
    if (event.type === 'shop') connection.connect()
  }

  const connection = new LiveConnection({
    load,
    open,
    onEvent: (data) => hear(JSON.parse(data) as LiveEvent),
    onBeat: (data) => heed(store.hearBeat(JSON.parse(data) as LiveBeat)),
    onStale: store.markStale,
    onFailure: (error) => { refused.value = error instanceof ApiFailure && (error.status === 401 || error.status === 403) },
  })

  onMounted(() => connection.connect())
  watch(() => toValue(boothId), () => connection.connect())
  watch(visibility, (seen) => {
    if (seen === 'visible') connection.nudge()
  })
  useEventListener('online', () => connection.nudge())
  onScopeDispose(() => connection.close())

  return { connection: computed(() => store.connection), refused: readonly(refused) }
}
