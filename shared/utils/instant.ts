import { digitsOf, powerOfTen, unitsOf } from './decimal-text'

/** Milliseconds of a minute. */
const MINUTE_MS = 60_000n

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
  const { units, scale } = unitsOf(minutes)
  const [exact, divisor] = [units * MINUTE_MS, powerOfTen(scale)]
  return Number(rounding === 'down' ? divideDown(exact, divisor) : -divideDown(-exact, divisor))
}

function divideDown(value: bigint, divisor: bigint): bigint {
  const cut = value / divisor
  return value < 0n && cut * divisor !== value ? cut - 1n : cut
}

/** Whole milliseconds → minutes as a plain decimal, rounded down to a thousandth. */
export function msToMinutes(ms: number): string {
  const units = divideDown(BigInt(ms) * 1000n, MINUTE_MS)
  const { whole, fraction } = digitsOf({ units, scale: 3 })
  const decimals = fraction.replace(/0+$/, '')
  return `${units < 0n ? '-' : ''}${whole}${decimals && `.${decimals}`}`
}

/** An instant so many minutes later, rounded down: a pot life is never lengthened by rounding. */
export function addMinutes(at: number, minutes: string): number {
  return at + minutesToMs(minutes)
}
