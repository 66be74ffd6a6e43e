import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { coatWindows, overcoatWindow, spanOf, windowMinutesAt } from '#shared/engine/window'
import { windowState } from '#shared/engine/window-state'
import { refusal, thrownBy } from './builders'

const MIN = 60_000
const at = (minutes: number) => 1_800_000_000_000 + minutes * MIN
const sprayed = { firstSprayedAt: at(0), lastSprayedAt: at(30) }
const window = (minMin: number, maxMin: number | null, workLeftMin = 0) =>
  overcoatWindow({ ...sprayed, minMs: minMin * MIN, maxMs: maxMin === null ? null : maxMin * MIN, workLeftMs: workLeftMin * MIN })

describe('a window', () => {
  it('opens from the last spray and closes from the first', () => {
    expect(window(120, 240)).toEqual({ opensAt: at(150), closesAt: at(240), closingAt: at(231), empty: false })
  })

  it('closes never where the sheet has no latest', () => {
    const never = window(120, null)
    expect(never).toEqual({ opensAt: at(150), closesAt: null, closingAt: null, empty: false })
    expect(windowState(never, at(100_000))).toBe('open')
  })

  it.each([
    ['10 % of 90 min', 120, 240, 0, 231],
    ['at least 5 min', 120, 190, 0, 185],
    ['at most 30 min', 120, 1590, 0, 1560],
    ['the work left where that is more', 120, 240, 25, 215],
    ['never before the middle', 120, 240, 80, 195],
    ['the middle of a window of two minutes', 3, 35, 0, 34],
  ])('begins to close %s before its end', (_, minMin, maxMin, workLeftMin, closing) => {
    expect(window(minMin, maxMin, workLeftMin).closingAt).toBe(at(closing))
  })

  it('may be empty, and is said to be', () => {
    const empty = window(120, 140)
    expect(empty).toEqual({ opensAt: at(150), closesAt: at(140), closingAt: null, empty: true })
    expect([139, 140, 155].map(minutes => windowState(empty, at(minutes)))).toEqual(['too-early', 'missed', 'missed'])
  })

  it('goes too-early, open, closing, missed', () => {
    const one = window(120, 240)
    expect([149, 150, 230, 231, 239, 240].map(minutes => windowState(one, at(minutes))))
      .toEqual(['too-early', 'open', 'open', 'closing', 'closing', 'missed'])
  })

  it('never goes back, and closes within itself', () => {
    const order = ['too-early', 'open', 'closing', 'missed']
    const minutes = fc.integer({ min: 0, max: 3000 })
    fc.assert(fc.property(minutes, fc.option(minutes), minutes, minutes, minutes, (minMin, maxMin, workLeft, a, b) => {
      const one = window(minMin, maxMin, workLeft)
      const [first, then] = a < b ? [a, b] : [b, a]
      const states = [first, then].map(minute => windowState(one, at(minute)))
      expect(order.indexOf(states[0]!)).toBeLessThanOrEqual(order.indexOf(states[1]!))
      if (one.closingAt !== null) {
        expect(one.closingAt).toBeGreaterThanOrEqual(one.opensAt)
        expect(one.closingAt).toBeLessThan(one.closesAt!)
      }
    }))
  })

  it.each([
    [{ firstSprayedAt: at(31) }, 'spray-reversed', 'lastSprayedAt'],
    [{ firstSprayedAt: 0.5 }, 'not-an-instant', 'firstSprayedAt'],
    [{ minMs: -1 }, 'not-a-duration', 'minMs'],
    [{ maxMs: Number.POSITIVE_INFINITY }, 'not-a-duration', 'maxMs'],
  ])('refuses %j', (more, code, field) => {
    expect(thrownBy(() => overcoatWindow({ ...sprayed, minMs: 0, maxMs: null, ...more }))).toMatchObject(refusal(code, field))
  })
})

it('both faces together run from the first to the last of them', () => {
  expect(spanOf([
    { firstSprayedAt: at(60), lastSprayedAt: at(80) }, { firstSprayedAt: at(0), lastSprayedAt: at(20) },
  ])).toEqual({ firstSprayedAt: at(0), lastSprayedAt: at(80) })
  expect(thrownBy(() => spanOf([]))).toMatchObject(refusal('application-missing'))
})

describe('sanding', () => {
  const times = { overcoatMinMs: 120 * MIN, overcoatMaxMs: 240 * MIN, sandMinMs: 720 * MIN, sandedMaxMs: 1440 * MIN }

  it('moves a piece to the second pair', () => {
    expect(coatWindows(sprayed, times, null)).toEqual({ overcoat: window(120, 240), sanded: false, sandFromAt: at(750), sandedTooEarly: false })
    expect(coatWindows(sprayed, times, { firstSprayedAt: at(800), lastSprayedAt: at(830) })).toEqual({
      overcoat: { opensAt: at(830), closesAt: at(2240), closingAt: at(2210), empty: false },
      sanded: true, sandFromAt: at(750), sandedTooEarly: false,
    })
  })

  it('too early is said, and the coat waits until it could have been sanded', () => {
    const early = coatWindows(sprayed, times, { firstSprayedAt: at(400), lastSprayedAt: at(420) })
    expect(early).toMatchObject({ sandedTooEarly: true, overcoat: { opensAt: at(750) } })
  })

  it('goes by the overcoat where the sheet is silent, and has no limit without one', () => {
    const silent = coatWindows(sprayed, { ...times, sandMinMs: null, sandedMaxMs: null }, { firstSprayedAt: at(200), lastSprayedAt: at(210) })
    expect(silent).toMatchObject({ sandFromAt: at(150), overcoat: { opensAt: at(210), closesAt: null } })
  })
})

describe('temperature', () => {
  const table = [{ c: '15', min: '240' }, { c: '20', min: '160' }, { c: '30', min: '60' }]

  it('opens later in the cold, not earlier in the heat than the sheet says', () => {
    expect(['5', '15', '20', '40'].map(c => windowMinutesAt('opens', table, c).minutes)).toEqual(['480', '240', '160', '60'])
  })

  it('closes earlier in the heat, not later in the cold than the sheet says', () => {
    expect(['5', '15', '20', '40'].map(c => windowMinutesAt('closes', table, c).minutes)).toEqual(['240', '240', '160', '30'])
  })
})
