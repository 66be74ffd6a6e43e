import type { BatchFacets, BatchListItem } from '#shared/schemas/batches'
import { potStateWords } from '~/utils/batch-words'

/** Names of the filters of the log, as they stand in the address and in the API. */
export const batchFilters = ['jobId', 'materialId', 'lot', 'lotId', 'mixedBy', 'boothId', 'from', 'to', 'state', 'deviations', 'review'] as const
export type BatchFilterName = (typeof batchFilters)[number]

const MONTHS = ['January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December'] as const
const WEEKDAYS = ['Sunday', 'Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday'] as const

function partsOf(day: string): { weekday: string; date: number; month: string; year: string } {
  const at = new Date(`${day}T00:00:00.000Z`)
  return { weekday: WEEKDAYS[at.getUTCDay()] ?? '', date: at.getUTCDate(), month: MONTHS[at.getUTCMonth()] ?? '', year: day.slice(0, 4) }
}

/**
 * A calendar day as a heading: `Tuesday 17 November`, with its year when that is not the year of `today`.
 * @param day and `today` as `YYYY-MM-DD`
 */
export function dayHeading(day: string, today: string): string {
  const { weekday, date, month, year } = partsOf(day)
  return `${weekday} ${date} ${month}${year === today.slice(0, 4) ? '' : ` ${year}`}`
}

/** From the oldest to the newest of some days: `Fri 13 to Tue 17 November`, `Mon 30 November to Tue 1 December`. */
export function daysSpan(oldest: string, newest: string, today: string): string {
  if (oldest === newest) return dayHeading(newest, today)
  const [from, to] = [partsOf(oldest), partsOf(newest)]
  const sameMonth = oldest.slice(0, 7) === newest.slice(0, 7)
  const withYear = to.year !== today.slice(0, 4) || from.year !== to.year
  const start = `${from.weekday.slice(0, 3)} ${from.date}${sameMonth ? '' : ` ${from.month}`}${from.year === to.year ? '' : ` ${from.year}`}`
  return `${start} to ${to.weekday.slice(0, 3)} ${to.date} ${to.month}${withYear ? ` ${to.year}` : ''}`
}

type Row = Pick<BatchListItem, 'id' | 'mixedAt'>

/** Rows that were read before, with where they ended. */
export interface KeptRows<R extends Row> {
  items: R[]
  nextCursor: string | null
}

/** True when `a` stands below `b` in the log. */
const isOlder = (a: Row, b: Row): boolean => a.mixedAt < b.mixedAt || (a.mixedAt === b.mixedAt && a.id < b.id)

/**
 * The first page as it is now, with the older rows that were read before under it. Where they do not meet, rows are
 * missing between them and only the page counts.
 */
export function mergePages<R extends Row>(page: KeptRows<R>, kept: KeptRows<R> | null): KeptRows<R> {
  const last = page.items.at(-1)
  const top = kept?.items[0]
  if (!kept || !last || !top || page.nextCursor === null || isOlder(top, last)) return page
  const below = kept.items.filter((row) => isOlder(row, last))
  return below.length === 0 ? page : { items: [...page.items, ...below], nextCursor: kept.nextCursor }
}

/** A filter that is set, in words. */
export interface FilterChip {
  name: BatchFilterName
  text: string
}

/** The filters that are set, each in words. An id that nobody knows is shown as such, so that it can be cleared. */
export function filterChips(values: Readonly<Record<string, string>>, facets: BatchFacets | null, lotName: string | null): FilterChip[] {
  const named = (list: readonly { id: string; name: string; code?: string }[] | undefined, id: string) => {
    const found = list?.find((one) => one.id === id)
    return found ? (found.code ?? found.name) : 'unknown'
  }
  const words: Record<BatchFilterName, (value: string) => string> = {
    jobId: (id) => `Job ${named(facets?.jobs, id)}`,
    materialId: (id) => `Material ${named(facets?.materials, id)}`,
    lot: (number) => `Lot ${number}`,
    lotId: () => `Lot ${lotName ?? 'unknown'}`,
    mixedBy: (id) => `Sprayer ${named(facets?.people, id)}`,
    boothId: (id) => named(facets?.booths, id),
    from: (day) => `From ${dayHeading(day, day)} ${day.slice(0, 4)}`,
    to: (day) => `To ${dayHeading(day, day)} ${day.slice(0, 4)}`,
    state: (state) => potStateWords[state as BatchListItem['state']] ?? 'State unknown',
    deviations: () => 'Deviations only',
    review: (flag) => (flag === 'true' ? 'Needs review' : 'Needs no review'),
  }
  return batchFilters.flatMap((name) => {
    const value = values[name]
    return value === undefined || value === '' ? [] : [{ name, text: words[name](value) }]
  })
}
