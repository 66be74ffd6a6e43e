import { defineStore } from 'pinia'
import { ref } from 'vue'
import type { ServerTime } from '#shared/schemas/live'
import { bestOffset, clockQuestions, steadyInstant, type ClockSample } from '#shared/utils/clock-offset'
import { callApi } from '~/utils/api'

/** Two measurements of the clock lie at least so far apart, in milliseconds. */
const leastBetweenMs = 2_000

/** The one clock that everything is counted by. */
export const useClockStore = defineStore('clock', () => {
  const offsetMs = ref<number | null>(null)
  const uncertaintyMs = ref<number | null>(null)
  const measuredAt = ref<number | null>(null)
  let measuring: Promise<void> | null = null
  let shown: number | null = null

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

  return { offsetMs, uncertaintyMs, measuredAt, serverNow, measureClock }
})
