import { decimalsNeeded, digitsOf, unitsOf, withScale } from '#shared/utils/decimal-text'
import { wallTime } from '#shared/utils/zone'

/**
 * Grams, minutes and dates for the eye. Everything here makes text; nothing here decides.
 * Quantities come as decimal strings and are never turned into floats. Instants are epoch milliseconds.
 */
const MINUS = '\u2212'
const THIN = '\u2009'
const MINUTE = 60_000
const WEEKDAYS = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat'] as const
const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'] as const

/** A number in printable parts, so that a template can set the thin space as its own element. */
export interface NumberParts {
  sign: '' | '\u2212' | '+'
  /** Groups of up to three digits, most significant first. */
  groups: string[]
  /** Digits after the point, '' where there are none. */
  fraction: string
}

/**
 * Splits a decimal string into sign, thousands groups and decimals.
 *
 * @param value decimal string with a point; anything else throws
 * @param decimals digits after the point, rounded half away from zero; left out, the digits stand as they are
 * @param signed also a plus for values above zero
 */
export function numberParts(value: string, decimals?: number, signed = false): NumberParts {
  const read = unitsOf(value)
  const shown = withScale(read, decimals ?? read.scale)
  const { whole, fraction } = digitsOf(shown)
  const sign = shown.units === 0n ? '' : shown.units < 0n ? MINUS : signed ? '+' : ''
  return { sign, groups: whole.replace(/\B(?=(\d{3})+$)/g, ' ').split(' '), fraction }
}

/**
 * Grams, or any quantity, with thin spaces between thousands: `1 490.0`.
 *
 * @param value decimal string
 * @param decimals those of the scale's division, zeros kept
 */
export function grams(value: string, decimals?: number): string {
  const { sign, groups, fraction } = numberParts(value, decimals)
  return `${sign}${groups.join(THIN)}${fraction && `.${fraction}`}`
}

/**
 * A sum for the eye: of numbers that do not end the first four digits that count stand, and three points say that more
 * follow: `496.551724137931 g` becomes `496.5517… g`. The reckoning itself keeps them all.
 */
export function sumText(text: string): string {
  return text.replace(/\b(0\.0*[1-9]\d{3}|[1-9]\d*\.\d{4})\d+/g, '$1\u2026')
}

/** Decimals of a scale's division: '0.1' → 1, '5' → 0. */
export function decimalsOf(division: string): number {
  return decimalsNeeded(unitsOf(division))
}

/** Per cent for the eye: `65 %`, with `signed` `+5.0 %`. The space does not break. */
export function percent(value: string, options: { decimals?: number, signed?: boolean } = {}): string {
  const { sign, groups, fraction } = numberParts(value, options.decimals, options.signed)
  return `${sign}${groups.join(THIN)}${fraction && `.${fraction}`}\u00A0%`
}

/**
 * A price: `11.20 EUR`. The space does not break.
 *
 * @param currency code of ISO 4217; without one the figure stands alone
 */
export function money(value: string, currency: string | null | undefined): string {
  return currency ? `${grams(value, 2)}\u00A0${currency}` : grams(value, 2)
}

/** Area in m², two decimals: `21.60`. */
export function area(valueM2: string, decimals = 2): string {
  return grams(valueM2, decimals)
}

/** Parts of a mix: `100 : 50 : 20`; a thinner range stands as `20–30`. */
export function ratio(parts: readonly (string | readonly [string, string])[]): string {
  const plain = (part: string): string => grams(part, decimalsOf(part))
  return parts.map(part => typeof part === 'string' ? plain(part) : `${plain(part[0])}–${plain(part[1])}`).join(' : ')
}

const two = (count: number): string => String(count).padStart(2, '0')

/**
 * A span of time, never as a bare 0:18: `4 min 30` under ten minutes, `18 min`, `2 h 06`, from 48 hours `3 d 4 h`.
 * Cut, never rounded up: it shows no more time than there is.
 *
 * @param ms milliseconds; below zero counts as zero
 */
export function duration(ms: number): string {
  const seconds = Math.floor(Math.max(0, ms) / 1000)
  const minutes = Math.floor(seconds / 60)
  const hours = Math.floor(minutes / 60)
  if (minutes < 10) return seconds % 60 ? `${minutes} min ${two(seconds % 60)}` : `${minutes} min`
  if (minutes < 60) return `${minutes} min`
  if (hours < 48) return minutes % 60 ? `${hours} h ${two(minutes % 60)}` : `${hours} h`
  return hours % 24 ? `${Math.floor(hours / 24)} d ${hours % 24} h` : `${Math.floor(hours / 24)} d`
}

/** Time past an end, counted up in whole minutes: `+9 min`, `+1 h 12`. */
export function over(ms: number): string {
  return `+${duration(Math.floor(Math.max(0, ms) / MINUTE) * MINUTE)}`
}

function dayText(year: number, month: number, day: number, withYear: boolean): string {
  const weekday = WEEKDAYS[new Date(Date.UTC(year, month - 1, day)).getUTCDay()]
  return `${weekday} ${day} ${MONTHS[month - 1]}${withYear ? ` ${year}` : ''}`
}

/** Clock time of the shop, 24 hours: `07:54`. `zone` is an IANA name. */
export function clock(ms: number, zone: string): string {
  const { hour, minute } = wallTime(ms, zone)
  return `${two(hour)}:${two(minute)}`
}

/** Clock time with seconds, for a last good reading: `07:54:20`. */
export function clockSeconds(ms: number, zone: string): string {
  return `${clock(ms, zone)}:${two(wallTime(ms, zone).second)}`
}

/** A day in the shop's zone: `Tue 17 Nov`, with the year only when it is not the year of `nowMs`. */
export function day(ms: number, zone: string, nowMs: number): string {
  const at = wallTime(ms, zone)
  return dayText(at.year, at.month, at.day, at.year !== wallTime(nowMs, zone).year)
}

/** Weekday of an instant in the shop's zone: `Tue`. */
export function weekday(ms: number, zone: string): string {
  const at = wallTime(ms, zone)
  return dayText(at.year, at.month, at.day, false).slice(0, 3)
}

/** Clock time, with its weekday where it is not the day of `nowMs`: `07:54`, `Fri 07:54`. */
export function clockNear(ms: number, zone: string, nowMs: number): string {
  return day(ms, zone, ms) === day(nowMs, zone, ms) ? clock(ms, zone) : `${weekday(ms, zone)} ${clock(ms, zone)}`
}

/** Day and clock time: `Tue 17 Nov 07:54`. */
export function dayClock(ms: number, zone: string, nowMs: number): string {
  return `${day(ms, zone, nowMs)} ${clock(ms, zone)}`
}

/** A calendar day without a time, such as a use-by date, always with its year: '2027-03-31' → `Wed 31 Mar 2027`. */
export function calendarDay(iso: string): string {
  const match = /^(\d{4})-(\d{2})-(\d{2})/.exec(iso)
  if (!match) throw new RangeError(`not a calendar day: ${iso}`)
  return dayText(Number(match[1]), Number(match[2]), Number(match[3]), true)
}
