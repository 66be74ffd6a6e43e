/** Years that finishing records are kept, and of those on site: 40 CFR 63.806 with 63.10(b)(1). */
const RECORD_YEARS = 5
export const RECORD_YEARS_ON_SITE = 2

/**
 * The day until which a record is kept: the same day, years later. A 29 February ends on 28 February where the year has
 * none (a convention: the period is never longer than the years).
 * @param day ISO date, `2026-12-01`
 */
export function keepUntil(day: string, years: number = RECORD_YEARS): string {
  const match = /^(\d{4})-(\d{2})-(\d{2})$/.exec(day)
  if (match === null) throw new RangeError('Not a day in ISO 8601')
  const year = String(Number(match[1]) + years).padStart(4, '0')
  const sameDay = `${year}-${match[2]}-${match[3]}`
  return day.endsWith('-02-29') && !isLeap(Number(year)) ? `${year}-02-28` : sameDay
}

function isLeap(year: number): boolean {
  return (year % 4 === 0 && year % 100 !== 0) || year % 400 === 0
}
