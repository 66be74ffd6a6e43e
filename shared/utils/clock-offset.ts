/** One question about the time. Own instants by the asking machine's clock, all in epoch milliseconds. */
export interface ClockSample {
  askedAt: number
  answeredAt: number
  serverNow: number
}

/** What has to be added to the own clock to get the server's, and how far off that may be at most. */
export interface ClockOffset {
  offsetMs: number
  /** Half of the way there and back, in milliseconds. */
  uncertaintyMs: number
}

/** How many times the clock is asked in a row; the quickest answer counts. */
export const clockQuestions = 5

/** The server is further off than this: the own clock was set, or the machine slept. */
const clockJumpMs = 1_000

/** The offset of one question: the server's instant lies in the middle of the way, give or take half of it. */
export function offsetOf({ askedAt, answeredAt, serverNow }: ClockSample): ClockOffset {
  const wayMs = Math.max(0, answeredAt - askedAt)
  return { offsetMs: Math.round(serverNow - (askedAt + wayMs / 2)), uncertaintyMs: wayMs / 2 }
}

/**
 * The offset of the quickest of several answers, which bounds the error best. A question during which the own clock
 * went backwards says nothing.
 *
 * @returns null when no question can be used
 */
export function bestOffset(samples: readonly ClockSample[]): ClockOffset | null {
  const usable = samples.filter(({ askedAt, answeredAt }) => answeredAt >= askedAt).map(offsetOf)
  return usable.reduce<ClockOffset | null>((best, one) => (best && best.uncertaintyMs <= one.uncertaintyMs ? best : one), null)
}

/** True when what the server says does not go with the offset that is used, at the own instant `ownNow`. */
export function hasJumped(serverNow: number, ownNow: number, offsetMs: number): boolean {
  return Math.abs(serverNow - (ownNow + offsetMs)) > clockJumpMs
}

/**
 * The next instant to show: a small correction backwards stands still until time has caught up, so that no digit jumps
 * back; a large one is a clock that was wrong, and is followed at once.
 */
export function steadyInstant(shown: number | null, present: number): number {
  return shown !== null && present < shown && shown - present <= clockJumpMs ? shown : present
}
