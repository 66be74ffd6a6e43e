import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { planDay } from '#shared/engine/day-plan'
import type { DayPlanInput, DayStep } from '#shared/engine/day-plan'
import { refusal, thrownBy } from './builders'

const MIN = 60_000
/** 06:00 of a day in UTC, counted from 0. */
const day = (number: number, hours: number, minutes = 0) => 1_800_000_000_000 - 1_800_000_000_000 % 86_400_000
  + number * 86_400_000 + (hours * 60 + minutes) * MIN
/** Four days, 07:00 to 16:00 with half an hour at noon. */
const intervals = [0, 1, 2, 3].flatMap(number => [
  { from: day(number, 7), to: day(number, 12) }, { from: day(number, 12, 30), to: day(number, 16) },
])
const coat = (name: string, workMin: number, minMin = 0, maxMin: number | null = null): DayStep =>
  ({ name, workMs: workMin * MIN, minMs: minMin * MIN, maxMs: maxMin === null ? null : maxMin * MIN })
const plan = (steps: DayStep[], more: Partial<DayPlanInput> = {}) =>
  planDay({ steps, workingIntervals: intervals, from: day(0, 7), todayUntil: day(1, 0), ...more })

describe('a day plan', () => {
  it('lets one coat begin as late as it is still done today: none is left half sprayed over night', () => {
    expect(plan([coat('topcoat', 60)]).starts).toEqual([
      { step: 0, startsAt: day(0, 15), endsAt: day(0, 16), opensAt: null, closesAt: null },
    ])
    expect(plan([coat('topcoat', 9 * 60)])).toEqual({
      starts: null, brokenBy: { step: 0, window: { opensAt: expect.any(Number) as number, closesAt: null } }, nextStart: null,
    })
  })

  it('begins two sealer coats two to four hours apart so late that the second is still done today', () => {
    // second done by 16:00: 30 min of work, so it begins 15:30, opens 13:30 at the latest; first sprayed 13:00 to 13:30
    const { starts, brokenBy, nextStart } = plan([coat('sealer', 30), coat('sealer', 30, 120, 240)])
    expect(starts).toEqual([
      { step: 0, startsAt: day(0, 13), endsAt: day(0, 13, 30), opensAt: null, closesAt: null },
      { step: 1, startsAt: day(0, 15, 30), endsAt: day(0, 16), opensAt: day(0, 15, 30), closesAt: day(0, 17) },
    ])
    expect([brokenBy, nextStart]).toEqual([null, null])
  })

  it('names the window that breaks today and the next start that works', () => {
    const { starts, brokenBy, nextStart } = plan([coat('sealer', 30), coat('sealer', 30, 120, 240)], { from: day(0, 14) })
    expect(starts).toBeNull()
    expect(brokenBy?.step).toBe(1)
    expect(nextStart).toBe(day(1, 7))
  })

  it('waits with a coat whose window is open over night, where only that keeps the next one', () => {
    // the first may wait until morning; after the second a third must follow within three hours
    const steps = [coat('isolate', 30), coat('colour', 60, 60, 24 * 60), coat('clear', 60, 60, 240)]
    const { starts } = plan(steps, { from: day(0, 15), todayUntil: day(0, 16) })
    expect(starts?.[0]?.startsAt).toBe(day(0, 15, 30))
    expect(starts?.[1]?.startsAt).toBeGreaterThanOrEqual(day(1, 7))
    expect(starts?.[2]?.endsAt).toBeLessThanOrEqual(starts![1]!.startsAt + 240 * MIN)
  })

  it('says that nothing fits where a window lies in the night for ever', () => {
    const { starts, brokenBy, nextStart } = plan([coat('a', 30), coat('b', 30, 600, 700)])
    expect(starts).toBeNull()
    expect(brokenBy?.step).toBe(1)
    expect(nextStart).toBeNull()
  })

  it('rests at noon', () => {
    const { starts } = plan([coat('a', 60)], { from: day(0, 11, 30), todayUntil: day(0, 11, 31) })
    expect(starts?.[0]).toMatchObject({ startsAt: day(0, 11, 30), endsAt: day(0, 13) })
  })

  it('takes the first interval as today where nobody says until when', () => {
    expect(planDay({ steps: [coat('a', 1)], workingIntervals: intervals, from: day(0, 8) }).starts?.[0]?.startsAt).toBe(day(0, 11, 59))
  })

  it('has no start after the shop has closed for good', () => {
    const { starts, brokenBy, nextStart } = plan([coat('a', 1)], { from: day(9, 0), todayUntil: day(10, 0) })
    expect([starts, nextStart]).toEqual([null, null])
    expect(brokenBy).toEqual({ step: 0, window: { opensAt: day(9, 0), closesAt: null } })
  })

  it('every step lies in its window and in working time, and no later minute of today works', () => {
    const step = fc.tuple(fc.integer({ min: 0, max: 120 }), fc.integer({ min: 0, max: 300 }), fc.option(fc.integer({ min: 30, max: 900 })))
    const steps = fc.array(step, { minLength: 1, maxLength: 4 })
      .map(list => list.map(([work, min, max]) => coat('x', work, min, max === null ? null : min + max)))
    let placed = 0
    fc.assert(fc.property(steps, fc.integer({ min: 7 * 60, max: 15 * 60 }), (given, fromMin) => {
      const from = day(0, 0, fromMin)
      const { starts, nextStart } = plan(given, { from, todayUntil: day(0, 16) })
      if (starts === null) {
        if (nextStart !== null) expect(nextStart).toBeGreaterThanOrEqual(day(0, 16))
        return
      }
      placed += 1
      starts.forEach(({ startsAt, endsAt, opensAt, closesAt }, index) => {
        expect(intervals.some(one => startsAt >= one.from && startsAt < one.to)).toBe(true)
        const worked = intervals.reduce((total, one) =>
          total + Math.max(0, Math.min(one.to, endsAt) - Math.max(one.from, startsAt)), 0)
        expect(worked).toBe(given[index]!.workMs)
        if (opensAt !== null) expect(startsAt).toBeGreaterThanOrEqual(opensAt)
        if (closesAt !== null) expect(endsAt).toBeLessThanOrEqual(closesAt)
      })
      const nextMinute = starts[0]!.startsAt - starts[0]!.startsAt % MIN + MIN
      if (nextMinute < day(0, 16)) {
        expect(plan(given, { from: nextMinute, todayUntil: day(0, 16) }).starts).toBeNull()
      }
    }), { numRuns: 100 })
    expect(placed).toBeGreaterThan(20)
  })

  it.each<[string, Partial<DayPlanInput>, string, string]>([
    ['no step', { steps: [] }, 'steps-count', 'steps'],
    ['no working interval', { workingIntervals: [] }, 'intervals-count', 'workingIntervals'],
    ['intervals that overlap', { workingIntervals: [{ from: day(0, 7), to: day(0, 12) }, { from: day(0, 11), to: day(0, 13) }] }, 'intervals-order', 'workingIntervals.1'],
    ['an interval that ends before it begins', { workingIntervals: [{ from: day(0, 7), to: day(0, 6) }] }, 'intervals-order', 'workingIntervals.0'],
    ['more than 14 days of work', { workingIntervals: [{ from: day(0, 0), to: day(15, 0) }] }, 'horizon-too-long', 'workingIntervals'],
    ['negative work', { steps: [coat('a', -1)] }, 'not-a-duration', 'steps.0.workMs'],
  ])('refuses %s', (_, more, code, field) => {
    expect(thrownBy(() => plan([coat('a', 1)], more))).toMatchObject(refusal(code, field))
  })
})
