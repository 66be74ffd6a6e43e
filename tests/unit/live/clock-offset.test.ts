import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { bestOffset, hasJumped, offsetOf, steadyInstant, type ClockSample } from '#shared/utils/clock-offset'

const minuteMs = 60_000
const wrongClocks = [['a day behind', -1440 * minuteMs], ['an hour behind', -60 * minuteMs], ['7 min ahead', 7 * minuteMs], ['50 s ahead', 50_000], ['right', 0]] as const

/** A question as a machine with a wrong clock would see it; the two ways may differ in length. */
function ask(serverAt: number, wrongBy: number, thereMs: number, backMs: number): ClockSample {
  return { askedAt: serverAt - thereMs + wrongBy, answeredAt: serverAt + backMs + wrongBy, serverNow: serverAt }
}

describe('the offset of a wrong clock', () => {
  it.each(wrongClocks)('is found when the clock is %s', (_, wrongBy) => {
    fc.assert(fc.property(
      fc.integer({ min: 1_700_000_000_000, max: 1_900_000_000_000 }),
      fc.array(fc.tuple(fc.integer({ min: 0, max: 900 }), fc.integer({ min: 0, max: 900 })), { minLength: 1, maxLength: 5 }),
      (server, ways) => {
        const best = bestOffset(ways.map(([there, back], index) => ask(server + index * 2_000, wrongBy, there, back)))
        expect(best).not.toBeNull()
        expect(Math.abs((best?.offsetMs ?? Infinity) + wrongBy)).toBeLessThanOrEqual((best?.uncertaintyMs ?? 0) + 0.5)
        expect(best?.uncertaintyMs).toBe(Math.min(...ways.map(([there, back]) => (there + back) / 2)))
      },
    ))
  })

  it('takes the quickest of several answers', () => {
    const samples = [ask(1_000_000, 0, 800, 10), ask(1_001_000, 0, 20, 20), ask(1_002_000, 0, 5, 400)]
    expect(bestOffset(samples)).toEqual({ offsetMs: 0, uncertaintyMs: 20 })
    expect(offsetOf(samples[0]!)).toEqual({ offsetMs: 395, uncertaintyMs: 405 })
  })

  it('does not use a question during which the clock was set back', () => {
    expect(bestOffset([{ askedAt: 2_000, answeredAt: 1_000, serverNow: 1_500 }])).toBeNull()
    expect(bestOffset([])).toBeNull()
  })
})

it('notices a jump of more than a second in either direction, and no less', () => {
  expect(hasJumped(10_000, 4_000, 6_000)).toBe(false)
  expect(hasJumped(11_000, 4_000, 6_000)).toBe(false)
  expect(hasJumped(11_001, 4_000, 6_000)).toBe(true)
  expect(hasJumped(8_999, 4_000, 6_000)).toBe(true)
})

describe('the instant that is shown', () => {
  it('stands still for a small correction and follows a large one', () => {
    expect(steadyInstant(null, 5_000)).toBe(5_000)
    expect(steadyInstant(5_000, 5_400)).toBe(5_400)
    expect(steadyInstant(5_000, 4_100)).toBe(5_000)
    expect(steadyInstant(5_000, 3_999)).toBe(3_999)
  })

  it('never steps back by less than a second whatever the corrections', () => {
    fc.assert(fc.property(fc.array(fc.integer({ min: 0, max: 20_000 }), { minLength: 2, maxLength: 40 }), (presents) => {
      let shown: number | null = null
      for (const present of presents) {
        const next = steadyInstant(shown, present)
        if (shown !== null && next < shown) expect(shown - next).toBeGreaterThan(1_000)
        shown = next
      }
    }))
  })
})
