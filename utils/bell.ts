const strokeMs = 4_000
const firstMinuteMs = 60_000
const slowStrokeMs = 30_000

/**
 * When the bell of a pot whose life is up strikes next: every 4 s for the first minute, then every 30 s.
 *
 * @param sinceMs milliseconds since the ringing began, 0 or more
 * @returns milliseconds from now until the next stroke
 */
export function untilNextStroke(sinceMs: number): number {
  if (sinceMs < firstMinuteMs) return strokeMs - (sinceMs % strokeMs)
  return slowStrokeMs - ((sinceMs - firstMinuteMs) % slowStrokeMs)
}
