import { useEventListener } from '@vueuse/core'
import { computed, onScopeDispose, ref, toValue, watch, type ComputedRef, type MaybeRefOrGetter } from 'vue'
import { untilNextStroke } from '~/utils/bell'
import { strike } from '~/utils/bell-sound'

const ringingHertz = 660
const softHertz = 440
const softLoudness = 0.35
const softGapMs = 700

interface Bell {
  /** False until a touch has let the browser make sound. */
  armed: ComputedRef<boolean>
  /** Must be called from a touch or key press: browsers allow sound only then. */
  arm: () => Promise<void>
  /** Two soft strokes, once: a pot has entered its last quarter. */
  chime: () => void
  /** One short stroke: somebody has silenced a pot. */
  tick: () => void
}

/**
 * The booth's bell. It rings as long as `soundingSince` is an instant: a stroke every 4 s for a minute, then every 30 s.
 * A screen that is opened later joins in where the ringing is.
 *
 * @param soundingSince when the last pot of this booth that is up and not silenced began to ring, epoch milliseconds
 * @param now the present by the same clock
 */
export function useBell(soundingSince: MaybeRefOrGetter<number | null>, now: () => number): Bell {
  const audio = ref<AudioContext | null>(null)
  const running = ref(false)
  let timer: ReturnType<typeof setTimeout> | undefined

  async function arm(): Promise<void> {
    audio.value ??= new AudioContext()
    await audio.value.resume()
    running.value = audio.value.state === 'running'
  }

  /** Browsers suspend sound when the machine sleeps; a strike on a suspended context would be lost in silence. */
  function sound(loudness: number, hertz: number): void {
    if (!audio.value) return
    running.value = audio.value.state === 'running'
    if (running.value) strike(audio.value, loudness, hertz)
  }

  function chime(): void {
    sound(softLoudness, softHertz)
    setTimeout(() => {
      // A bell that has begun to ring meanwhile says more.
      if (toValue(soundingSince) === null) sound(softLoudness, softHertz)
    }, softGapMs)
  }

  const tick = (): void => sound(softLoudness, ringingHertz)

  function ring(): void {
    const since = toValue(soundingSince)
    if (since === null) return
    sound(1, ringingHertz)
    timer = setTimeout(ring, untilNextStroke(Math.max(0, now() - since)))
  }

  watch([() => toValue(soundingSince), running], ([since, canSound]) => {
    clearTimeout(timer)
    if (since !== null && canSound) ring()
  }, { immediate: true })

  useEventListener(document, 'visibilitychange', () => {
    if (audio.value) running.value = audio.value.state === 'running'
  })
  onScopeDispose(() => {
    clearTimeout(timer)
    void audio.value?.close()
  })

  return { armed: computed(() => running.value), arm, chime, tick }
}
