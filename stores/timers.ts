import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { LiveBeat, LiveEvent, LiveSnapshot, ServerTime } from '#shared/schemas/live'
import { bestOffset, clockQuestions, hasJumped, steadyInstant, type ClockSample } from '#shared/utils/clock-offset'
import { applyEvent, catchUp, emptyLiveState, type LiveState } from '#shared/utils/live-reducer'
import { callApi } from '~/utils/api'

/** Whether what is shown is what is. `since`: the server's instant of the last word from it, epoch milliseconds. */
export type Connection =
  | { state: 'connecting' }
  | { state: 'live' }
  | { state: 'stale'; since: number }

/** Two measurements of the clock lie at least so far apart, in milliseconds. */
const leastBetweenMs = 2_000

/** What runs in the shop, as the server told it, and the one clock that everything is counted by. */
export const useTimersStore = defineStore('timers', () => {
  const live = shallowRef<LiveState>(emptyLiveState)
  const loaded = ref(false)
  const connection = ref<Connection>({ state: 'connecting' })
  const offsetMs = ref<number | null>(null)
  const uncertaintyMs = ref<number | null>(null)
  const measuredAt = ref<number | null>(null)
  const heardAt = ref<number | null>(null)
  let measuring: Promise<void> | null = null
  let shown: number | null = null
  let held: LiveEvent[] | null = null

  /** The server's present in epoch milliseconds; this machine's own until it was measured. Never steps back a little. */
  function serverNow(): number {
    shown = steadyInstant(shown, Date.now() + (offsetMs.value ?? 0))
    return shown
  }

  async function ask(): Promise<ClockSample> {
    const askedAt = Date.now()
    const { now } = await callApi<ServerTime>('/api/time')
    return { askedAt, answeredAt: Date.now(), serverNow: Date.parse(now) }
  }

  async function measure(): Promise<void> {
    const samples: ClockSample[] = []
    for (let question = 0; question < clockQuestions; question++) samples.push(await ask())
    const best = bestOffset(samples)
    if (!best) return
    offsetMs.value = best.offsetMs
    uncertaintyMs.value = best.uncertaintyMs
    measuredAt.value = Date.now()
  }

  /**
   * Measures the clock anew: five questions, the quickest answer counts. Several who ask at once share one measurement.
   *
   * @throws ApiFailure when the server does not answer; the offset that was known stands
   */
  function measureClock(): Promise<void> {
    const age = measuredAt.value === null ? Infinity : Math.abs(Date.now() - measuredAt.value)
    if (age < leastBetweenMs) return Promise.resolve()
    measuring ??= measure().finally(() => { measuring = null })
    return measuring
  }

  /** Something came from the server. Returns true when its clock and ours have come apart. */
  function hear(at: string): boolean {
    heardAt.value = Date.now()
    if (connection.value.state !== 'live') connection.value = { state: 'live' }
    return offsetMs.value !== null && hasJumped(Date.parse(at), Date.now(), offsetMs.value)
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
    connection.value = { state: 'stale', since: serverNow() - ago }
  }

  return {
    live, loaded, connection, offsetMs, uncertaintyMs, measuredAt, heardAt,
    pots: computed(() => live.value.pots),
    windows: computed(() => live.value.windows),
    alarms: computed(() => live.value.alarms),
    booths: computed(() => live.value.booths),
    lastSeq: computed(() => live.value.lastSeq),
    serverNow, measureClock, hearEvent, hearBeat, loadSnapshot, markStale,
  }
})
