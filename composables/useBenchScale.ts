import { onScopeDispose, ref, shallowRef, type Ref } from 'vue'
import { keypadSource, type KeypadSource, type ScaleReading, type ScaleSource, type ScaleSourceKind, type ScaleSourceState, type SourceClock } from '#shared/utils/bench-scale'
import { SimulatedScale, type SimulatedSight, type SimulatedStart } from '#shared/utils/bench-scale-simulated'
import { useBenchScaleState } from '~/composables/useBenchScaleState'

interface BenchScaleUse {
  keypad: KeypadSource
  /** Null where weights are typed. */
  simulated: SimulatedScale | null
  /** Of the simulated scale, for the buttons that work it. */
  sight: Ref<SimulatedSight | null>
  state: Ref<ScaleSourceState>
  /** Looks again, after a hand was at it. */
  look: () => void
  /** Zero for what comes next: on the scale and on the keypad. */
  zero: () => void
  /** The scale is given up; the keypad goes on. */
  leaveScale: () => void
}

const clock: SourceClock = {
  now: () => Date.now(),
  after: (ms, call) => {
    const timer = setTimeout(call, ms)
    return () => clearTimeout(timer)
  },
}

/**
 * The source of weights at this bench, connected while the caller lives.
 *
 * @param start where a simulated scale begins; null where weights are typed
 * @param take gets every reading and where it comes from
 * @param changed gets every change of the scale's state
 */
export function useBenchScale(
  start: SimulatedStart | null, take: (reading: ScaleReading, source: ScaleSourceKind) => void, changed: (state: ScaleSourceState) => void,
): BenchScaleUse {
  const shown = useBenchScaleState()
  const state = ref<ScaleSourceState>('connecting')
  const keypad = keypadSource(clock)
  let simulated = start === null ? null : new SimulatedScale(clock, start)
  const sight = shallowRef<SimulatedSight | null>(null)
  const look = (): void => { sight.value = simulated?.sight() ?? null }
  const tell = (next: ScaleSourceState): void => {
    state.value = next
    shown.value = next
    changed(next)
    look()
  }
  const join = (source: ScaleSource): void => {
    source.readings((reading) => {
      look()
      take(reading, source.kind)
    })
    source.states(tell)
    void source.connect()
  }

  function leaveScale(): void {
    simulated?.disconnect()
    simulated = null
    look()
    join(keypad)
  }

  join(simulated ?? keypad)
  onScopeDispose(() => {
    simulated?.disconnect()
    keypad.disconnect()
    shown.value = null
  })
  return {
    keypad,
    get simulated() { return simulated },
    sight,
    state,
    look,
    zero: () => {
      keypad.reset()
      void simulated?.tare()
    },
    leaveScale,
  }
}
