import { describe, expect, it } from 'vitest'
import { dayHeading, daysSpan, filterChips, mergePages } from '~/utils/batch-log'

const today = '2026-11-18'

describe('days of the log', () => {
  it.each([['2026-11-17', 'Tuesday 17 November'], ['2025-12-31', 'Wednesday 31 December 2025']])('%s is headed %s', (day, heading) => {
    expect(dayHeading(day, today)).toBe(heading)
  })

  it.each([
    ['2026-11-17', '2026-11-17', 'Tuesday 17 November'],
    ['2026-11-13', '2026-11-17', 'Fri 13 to Tue 17 November'],
    ['2026-10-30', '2026-11-17', 'Fri 30 October to Tue 17 November'],
    ['2025-12-30', '2026-01-02', 'Tue 30 December 2025 to Fri 2 January 2026'],
    ['2025-11-13', '2025-11-17', 'Thu 13 to Mon 17 November 2025'],
  ])('%s to %s spans %s', (oldest, newest, text) => {
    expect(daysSpan(oldest, newest, today)).toBe(text)
  })
})

describe('rows that were read before', () => {
  const row = (id: string, minute: number) => ({ id, mixedAt: new Date(Date.UTC(2026, 10, 17, 7, minute)).toISOString() })
  const [a, b, c, d, e] = [row('a', 50), row('b', 40), row('c', 30), row('d', 20), row('e', 10)] as const

  it('stay under the first page as it is now', () => {
    expect(mergePages({ items: [a, b], nextCursor: 'b' }, { items: [b, c, d], nextCursor: 'd' })).toEqual({ items: [a, b, c, d], nextCursor: 'd' })
  })

  it('go where they have left the first page', () => {
    expect(mergePages({ items: [a, c], nextCursor: 'c' }, { items: [a, b, c, d], nextCursor: null })).toEqual({ items: [a, c, d], nextCursor: null })
  })

  it('do not count where rows would be missing between, or nothing is older than the page', () => {
    expect(mergePages({ items: [a, b], nextCursor: 'b' }, { items: [d, e], nextCursor: null })).toEqual({ items: [a, b], nextCursor: 'b' })
    expect(mergePages({ items: [a], nextCursor: null }, { items: [a, b], nextCursor: null })).toEqual({ items: [a], nextCursor: null })
    expect(mergePages({ items: [a, b], nextCursor: 'b' }, { items: [a, b], nextCursor: 'old' })).toEqual({ items: [a, b], nextCursor: 'b' })
  })

  it('are sorted out by id where they share an instant', () => {
    const [x, y, z] = [row('z', 5), row('y', 5), row('x', 5)]
    expect(mergePages({ items: [x, y], nextCursor: 'y' }, { items: [x, y, z], nextCursor: null }).items).toEqual([x, y, z])
  })
})

describe('filters in words', () => {
  const facets = { jobs: [{ id: 'j', code: 'J-1042', name: 'Fronts' }], materials: [], people: [{ id: 'p', name: 'Mara T.' }], booths: [], guns: [], reviewOpen: 0 }

  it('stand in one order, whatever the address says first', () => {
    expect(filterChips({ review: 'true', mixedBy: 'p', jobId: 'j', lot: '26-1107', state: 'emptied', from: '2026-11-13' }, facets, null)).toEqual([
      { name: 'jobId', text: 'Job J-1042' }, { name: 'lot', text: 'Lot 26-1107' }, { name: 'mixedBy', text: 'Sprayer Mara T.' },
      { name: 'from', text: 'From Friday 13 November 2026' }, { name: 'state', text: 'Emptied' }, { name: 'review', text: 'Needs review' },
    ])
  })

  it('can be cleared also where nobody knows the id', () => {
    expect(filterChips({ jobId: 'gone', lotId: 'l' }, null, null)).toEqual([{ name: 'jobId', text: 'Job unknown' }, { name: 'lotId', text: 'Lot unknown' }])
  })
})
