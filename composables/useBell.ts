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
}

/**
 * The booth's bell. It rings as long as `ringing` holds: a stroke every 4 s for a minute, then every 30 s.
 *
 * @param ringing whether a pot of this booth is up and not silenced
 */
export function useBell(ringing: MaybeRefOrGetter<boolean>): Bell {
  const audio = ref<AudioContext | null>(null)
  const running = ref(false)
  let timer: ReturnType<typeof setTimeout> | undefined
  let began = 0

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
    setTimeout(() => sound(softLoudness, softHertz), softGapMs)
  }

  function ring(): void {
    sound(1, ringingHertz)
    timer = setTimeout(ring, untilNextStroke(performance.now() - began))
  }

  watch([() => toValue(ringing), running], ([isRinging, canSound]) => {
    clearTimeout(timer)
    if (!isRinging || !canSound) return
    began = performance.now()
    ring()
  }, { immediate: true })

  useEventListener(document, 'visibilitychange', () => {
    if (audio.value) running.value = audio.value.state === 'running'
  })
  onScopeDispose(() => {
    clearTimeout(timer)
    void audio.value?.close()
  })

  return { armed: computed(() => running.value), arm, chime }
}
