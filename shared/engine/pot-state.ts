import { EngineError } from './error'

/** A pot that is not emptied. `life-up` is never lengthened: flush the gun, dispose by chemistry. */
export type PotState = 'fresh' | 'closing' | 'life-up'

/** Instants are integer epoch milliseconds. */
export interface PotTimes {
  startsAt: number
  lateAt: number
  endsAt: number
}

/**
 * *closing* from the late limit on, *life-up* from the end on, both inclusive.
 * @throws EngineError `times-reversed` unless startsAt ≤ lateAt ≤ endsAt
 */
export function potState({ startsAt, lateAt, endsAt, now }: PotTimes & { now: number }): PotState {
  if (startsAt > lateAt || lateAt > endsAt) {
    throw new EngineError('times-reversed', 'lateAt', 'A pot starts, turns late and ends in this order')
  }
  if (now >= endsAt) return 'life-up'
  return now >= lateAt ? 'closing' : 'fresh'
}
