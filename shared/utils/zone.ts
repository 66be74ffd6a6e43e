/** Building a formatter is dear; a list of batches would build hundreds. */
const formats = new Map<string, Intl.DateTimeFormat>()

function formatOf(zone: string): Intl.DateTimeFormat {
  const known = formats.get(zone)
  if (known) return known
  const made = new Intl.DateTimeFormat('en-GB', {
    timeZone: zone, hourCycle: 'h23', year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit',
  })
  formats.set(zone, made)
  return made
}

const dayMs = 86_400_000

/** What calendar and wall clock of a zone show. */
interface WallTime { year: number, month: number, day: number, hour: number, minute: number, second: number }

/**
 * What the calendar and the wall clock of a zone show at an instant.
 * @param ms epoch milliseconds
 * @param zone IANA name
 * @throws RangeError for an unknown zone
 */
export function wallTime(ms: number, zone: string): WallTime {
  const part: Record<string, number> = {}
  for (const { type, value } of formatOf(zone).formatToParts(ms)) part[type] = Number(value)
  const { year = 0, month = 1, day = 1, hour = 0, minute = 0, second = 0 } = part
  return { year, month, day, hour, minute, second }
}

/** Milliseconds by which the zone's wall clock is ahead of UTC at an instant. */
function offsetMs(ms: number, zone: string): number {
  const { year, month, day, hour, minute, second } = wallTime(ms, zone)
  return Date.UTC(year, month - 1, day, hour, minute, second) - Math.floor(ms / 1000) * 1000
}

/** True for an IANA name that this machine knows. */
export function isZone(zone: string): boolean {
  try {
    formatOf(zone)
    return true
  } catch (error) {
    if (error instanceof RangeError) return false
    throw error
  }
}

/**
 * The shop's calendar day of an instant, `YYYY-MM-DD`.
 * @param ms epoch milliseconds
 * @param zone IANA name
 * @throws RangeError for an unknown zone
 */
export function shopDate(ms: number, zone: string): string {
  return new Date(ms + offsetMs(ms, zone)).toISOString().slice(0, 10)
}

/**
 * The first instant of a calendar day in the shop's zone, epoch milliseconds. Where the clock jumps over
 * midnight, that is the first instant that the day has.
 * @param day `YYYY-MM-DD`
 */
export function startOfShopDay(day: string, zone: string): number {
  const wall = dayNumber(day) * dayMs
  const guess = wall - offsetMs(wall, zone)
  const start = wall - offsetMs(guess, zone)
  const earlier = wall - offsetMs(guess - dayMs / 2, zone)
  if (earlier < start && shopDate(earlier, zone) === day) return earlier
  return shopDate(start, zone) === day ? start : earlier
}

/** Calendar days from one day to another, below 0 when it lies before: `daysBetween('2026-12-01', '2026-12-15')` is 14. */
export function daysBetween(from: string, to: string): number {
  return dayNumber(to) - dayNumber(from)
}

/** The calendar day so many days later. */
export function addDays(day: string, days: number): string {
  return new Date((dayNumber(day) + days) * dayMs).toISOString().slice(0, 10)
}

/** Days since 1970-01-01; a calendar day has no zone. */
function dayNumber(day: string): number {
  const at = Date.parse(`${day}T00:00:00.000Z`)
  if (Number.isNaN(at)) throw new RangeError(`not a calendar day: ${day}`)
  return at / dayMs
}

/** The zone's wall clock with its offset, to the second: `2026-11-17T13:26:05+01:00`. Names one instant and can be read by people. */
export function zonedIso(ms: number, zone: string): string {
  const offset = offsetMs(ms, zone)
  const minutes = Math.abs(offset) / 60_000
  const two = (count: number) => String(Math.floor(count)).padStart(2, '0')
  return `${new Date(ms + offset).toISOString().slice(0, 19)}${offset < 0 ? '-' : '+'}${two(minutes / 60)}:${two(minutes % 60)}`
}

/**
 * The instant at which a zone's wall clock shows this, epoch milliseconds; where it shows it twice, the first time.
 * @param wall `2026-11-17T13:26` or with seconds
 * @throws RangeError for anything else
 */
export function instantOfWall(wall: string, zone: string): number {
  const utc = Date.parse(`${wall.length === 16 ? `${wall}:00` : wall}.000Z`)
  if (!/^\d{4}-\d\d-\d\dT\d\d:\d\d(?::\d\d)?$/.test(wall) || Number.isNaN(utc)) throw new RangeError('not a wall clock time')
  const [early, late] = [utc - offsetMs(utc - dayMs / 2, zone), utc - offsetMs(utc + dayMs / 2, zone)]
  const fits = [early, late].filter((at) => at + offsetMs(at, zone) === utc)
  return Math.min(...(fits.length > 0 ? fits : [early]))
}

/** What the wall clock shows at an instant, to the second: `2026-11-17T13:26:05`. */
export const wallText = (ms: number, zone: string): string => new Date(ms + offsetMs(ms, zone)).toISOString().slice(0, 19)
