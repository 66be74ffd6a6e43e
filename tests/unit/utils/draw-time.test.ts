import { describe, expect, it } from 'vitest'
import { leftLabel, lifeSteps, lifeTicks, pairLabels, timeScale, windowRange } from '~/utils/draw-time'

const MIN = 60_000
const HOUR = 60 * MIN
const DAY = 24 * HOUR

describe('lifeSteps', () => {
  it.each([
    [4 * HOUR, 480, HOUR, 15 * MIN], [151 * MIN, 480, HOUR, 15 * MIN], [150 * MIN, 480, 30 * MIN, 10 * MIN], [2 * HOUR, 480, 30 * MIN, 10 * MIN],
    [4 * DAY, 480, DAY, 6 * HOUR], [3 * MIN, 480, MIN, 15_000], [20 * MIN, 480, 10 * MIN, 5 * MIN], [24 * HOUR, 480, 4 * HOUR, HOUR],
  ])('a life of %i ms on %i px', (span, width, major, minor) => {
    expect(lifeSteps(span, width, 55)).toEqual({ major, minor })
  })

  it('never sets labels closer than they are wide', () => {
    for (const span of [40 * MIN, 150 * MIN, 8 * HOUR, 40 * HOUR, 30 * DAY]) {
      const { major } = lifeSteps(span, 320, 60)
      expect(major / span * 320).toBeGreaterThanOrEqual(60)
    }
  })
})

describe('leftLabel', () => {
  it.each([[30 * MIN, '30 min'], [90 * MIN, '1 h 30'], [HOUR, '1 h'], [3 * HOUR, '3 h'], [2 * DAY, '2 d'], [36 * HOUR, '36 h']])('%i ms reads %s', (ms, text) => {
    expect(leftLabel(ms)).toBe(text)
  })
})

describe('lifeTicks', () => {
  const ticks = lifeTicks({ spanMs: 4 * HOUR, width: 486, pad: 3, fontPx: 13, startLabelPx: 39, endLabelPx: 40 })

  it('counts back from the end, so that the index reads what is left', () => {
    const labels = ticks.filter(tick => tick.label).map(tick => tick.label)
    expect(labels).toEqual(['1 h', '2 h', '3 h'])
    expect(ticks.find(tick => tick.label === '1 h')?.x).toBeCloseTo(3 + 480 * 0.75)
  })

  it('drops or moves labels that would touch the times at both ends', () => {
    const narrow = lifeTicks({ spanMs: 4 * HOUR, width: 200, pad: 3, fontPx: 13, startLabelPx: 39, endLabelPx: 40 })
    for (const tick of narrow.filter(found => found.label)) {
      const half = tick.label.length * 13 * 0.27
      expect(tick.labelX - half).toBeGreaterThanOrEqual(3 + 39)
      expect(tick.labelX + half).toBeLessThanOrEqual(197 - 40)
    }
  })
})

describe('windowRange', () => {
  it('holds coat, opening, close and now', () => {
    const range = windowRange({ coatFrom: 0, opensAt: 2 * HOUR, closesAt: 8 * HOUR, closingAt: null, now: 9 * HOUR })
    expect(range.from).toBe(0)
    expect(range.to).toBeGreaterThan(9 * HOUR)
  })

  it('leaves room after the opening of a window that never closes', () => {
    const range = windowRange({ opensAt: 2 * HOUR, closesAt: null, closingAt: null })
    expect(range.from).toBeLessThan(2 * HOUR)
    expect(range.to).toBeGreaterThan(2 * HOUR)
  })
})

describe('timeScale', () => {
  it('maps the stretch to the bar and holds what lies outside at its ends', () => {
    const x = timeScale(100, 200, 4, 108)
    expect([x(100), x(150), x(200), x(0), x(999)]).toEqual([4, 54, 104, 4, 104])
  })
})

describe('pairLabels', () => {
  it.each([[100, 300], [100, 110], [2, 8], [390, 398], [200, 200]])('two times wanted at %i and %i stay apart and inside', (first, second) => {
    const [left, right] = pairLabels(first, second, 40, 400)
    expect(right - left).toBeGreaterThanOrEqual(40)
    expect(left).toBeGreaterThanOrEqual(20)
    expect(right).toBeLessThanOrEqual(380)
  })
})
