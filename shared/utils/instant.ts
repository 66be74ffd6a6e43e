import { Decimal } from 'decimal.js'

/** Milliseconds of a minute. */
const MINUTE_MS = 60_000

/** ISO 8601 UTC with milliseconds → whole epoch milliseconds. The engine counts in these only. */
export function toMs(iso: string): number {
  const at = Date.parse(iso)
  if (Number.isNaN(at)) throw new RangeError('Not an instant in ISO 8601')
  return at
}

/** Whole epoch milliseconds → `2026-11-17T07:53:00.000Z`. */
export function toIso(at: number): string {
  return new Date(at).toISOString()
}

/**
 * Minutes as a plain decimal → whole milliseconds.
 * @param rounding `down` for what must not last longer, `up` for what must not be shorter
 */
export function minutesToMs(minutes: string, rounding: 'down' | 'up' = 'down'): number {
  const exact = new Decimal(minutes).times(MINUTE_MS)
  return (rounding === 'down' ? exact.floor() : exact.ceil()).toNumber()
}

/** Whole milliseconds → minutes as a plain decimal, rounded down to a thousandth. */
export function msToMinutes(ms: number): string {
  return new Decimal(ms).div(MINUTE_MS).toDecimalPlaces(3, Decimal.ROUND_FLOOR).toFixed()
}

/** An instant so many minutes later, rounded down: a pot life is never lengthened by rounding. */
export function addMinutes(at: number, minutes: string): number {
  return at + minutesToMs(minutes)
}
