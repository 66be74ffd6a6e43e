import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { LiveBeat, LiveEvent, LiveSnapshot } from '#shared/schemas/live'
import { hasJumped } from '#shared/utils/clock-offset'
import { applyEvent, catchUp, emptyLiveState, type LiveState } from '#shared/utils/live-reducer'
import { useClockStore } from '~/stores/clock'
import { callApi } from '~/utils/api'

/** Whether what is shown is what is. `since`: the server's instant of the last word from it, epoch milliseconds. */
export type Connection =
  | { state: 'connecting' }
  | { state: 'live' }
  | { state: 'stale'; since: number }

/** What runs in the shop, as the server told it. */
export const useTimersStore = defineStore('timers', () => {
  const clock = useClockStore()
  const live = shallowRef<LiveState>(emptyLiveState)
  const loaded = ref(false)
  const connection = ref<Connection>({ state: 'connecting' })
  const heardAt = ref<number | null>(null)
  let held: LiveEvent[] | null = null

  /** Something came from the server. Returns true when its clock and ours have come apart. */
  function hear(at: string): boolean {
    heardAt.value = Date.now()
    if (connection.value.state !== 'live') connection.value = { state: 'live' }
    return clock.offsetMs !== null && hasJumped(Date.parse(at), Date.now(), clock.offsetMs)
  }

  function hearEvent(event: LiveEvent): boolean {
    held?.push(event)
    live.value = applyEvent(live.value, event)
    return hear(event.serverNow)
  }

  const hearBeat = (beat: LiveBeat): boolean => hear(beat.serverNow)

  /**
   * Fetches everything that runs and adds what happened meanwhile.
   *
   * @throws ApiFailure when the server does not answer or refuses; what was known stands
   */
  async function loadSnapshot(boothId: string | null): Promise<void> {
    const events: LiveEvent[] = []
    held = events
    try {
      const snapshot = await callApi<LiveSnapshot>('/api/live', boothId === null ? {} : { query: { boothId } })
      live.value = catchUp(snapshot, events)
      loaded.value = true
    } finally {
      if (held === events) held = null
    }
  }

  /** Nothing came for too long. What is known stays and its timers run on. */
  function markStale(): void {
    if (connection.value.state === 'stale') return
    const ago = heardAt.value === null ? 0 : Date.now() - heardAt.value
    connection.value = { state: 'stale', since: clock.serverNow() - ago }
  }

  return {
    live, loaded, connection, heardAt,
    pots: computed(() => live.value.pots),
    windows: computed(() => live.value.windows),
    alarms: computed(() => live.value.alarms),
    booths: computed(() => live.value.booths),
    lastSeq: computed(() => live.value.lastSeq),
    hearEvent, hearBeat, loadSnapshot, markStale,
  }
})
