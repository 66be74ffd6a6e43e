import { useEventListener } from '@vueuse/core'
import { onScopeDispose, watch } from 'vue'
import { heardOf, soundOf, type BenchSound } from '#shared/utils/bench-sound'
import { useBenchSoundOn } from '~/composables/useBenchSoundOn'
import { strike } from '~/utils/bell-sound'

const tickHertz = 880
const tickLoudness = 0.25
const lowHertz = 220
const lowLoudness = 0.5
const lowGapMs = 350

/**
 * Lets be heard how the weighing stands: hands and eyes are at the tin. Browsers allow sound from the first touch on.
 *
 * @param heard how the weighing stands now; null while nothing is weighed
 * @param weighing changes where another weighing begins
 */
export function useBenchSound(heard: () => Parameters<typeof soundOf>[1] | null, weighing: () => string): void {
  const isOn = useBenchSoundOn()
  let audio: AudioContext | null = null
  let before: ReturnType<typeof heardOf> = heard()?.verdict ?? null

  function arm(): void {
    audio ??= new AudioContext()
    if (audio.state !== 'running') void audio.resume()
  }

  function play(sound: BenchSound): void {
    const out = audio
    if (out?.state !== 'running' || sound === null || !isOn.value) return
    if (sound === 'tick') return strike(out, tickLoudness, tickHertz)
    strike(out, lowLoudness, lowHertz)
    setTimeout(() => { if (out.state === 'running') strike(out, lowLoudness, lowHertz) }, lowGapMs)
  }

  useEventListener(window, ['pointerdown', 'keydown'], arm)
  watch([heard, weighing], ([now, at], [, earlier]) => {
    if (at !== earlier) before = null
    if (now === null) return
    play(soundOf(before, now))
    before = heardOf(before, now)
  })
  onScopeDispose(() => void audio?.close())
}
