import { EngineError } from './error'

/** Milliseconds of a minute. Instants and durations in the engine are whole epoch milliseconds. */
export const MINUTE_MS = 60_000

/** Year 9999: no instant of a shop lies outside ±. */
const LAST_INSTANT = 253_402_300_799_999
/** Ten years. */
const LONGEST_DURATION = 315_576_000_000

/** @throws EngineError `not-an-instant` */
export function readInstant(at: number, field: string): number {
  if (typeof at !== 'number' || at % 1 !== 0 || at < 0 || at > LAST_INSTANT) {
    throw new EngineError('not-an-instant', field, 'Give an instant in whole milliseconds')
  }
  return at
}

/** @throws EngineError `not-a-duration` for anything but 0 to ten years in whole milliseconds */
export function readDuration(ms: number, field: string): number {
  if (typeof ms !== 'number' || ms % 1 !== 0 || ms < 0 || ms > LONGEST_DURATION) {
    throw new EngineError('not-a-duration', field, 'Give a duration in whole milliseconds, at most ten years')
  }
  return ms
}

export function later(a: number, b: number): number {
  return a > b ? a : b
}

export function earlier(a: number, b: number): number {
  return a < b ? a : b
}

/** Whole quotient, rounded down; for non-negative whole numbers. */
export function wholePart(value: number, divisor: number): number {
  return (value - value % divisor) / divisor
}
