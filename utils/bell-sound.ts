/** Partials of a small bronze bell: ratio to the strike note, loudness, seconds until it has died away. */
const partials = [
  { ratio: 0.5, gain: 0.28, seconds: 3.2 },
  { ratio: 1, gain: 0.5, seconds: 2.4 },
  { ratio: 1.19, gain: 0.3, seconds: 1.9 },
  { ratio: 1.5, gain: 0.22, seconds: 1.5 },
  { ratio: 2, gain: 0.26, seconds: 1.2 },
  { ratio: 2.67, gain: 0.14, seconds: 0.7 },
] as const

/** Strikes the bell once. `loudness` from 0 to 1; `hertz` is the strike note. */
export function strike(audio: AudioContext, loudness: number, hertz: number): void {
  const start = audio.currentTime
  const out = audio.createGain()
  out.gain.value = loudness
  out.connect(audio.destination)
  for (const { ratio, gain, seconds } of partials) {
    const tone = audio.createOscillator()
    const envelope = audio.createGain()
    tone.frequency.value = hertz * ratio
    envelope.gain.setValueAtTime(0.0001, start)
    envelope.gain.exponentialRampToValueAtTime(gain, start + 0.008)
    envelope.gain.exponentialRampToValueAtTime(0.0001, start + seconds)
    tone.connect(envelope).connect(out)
    tone.start(start)
    tone.stop(start + seconds)
  }
}
