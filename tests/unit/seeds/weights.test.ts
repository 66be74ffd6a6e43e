import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { gramsOf, nearest, tenthsOf } from '../../../seeds/demo/weights'

describe('weights in tenths', () => {
  it.each([['0', 0], ['1', 10], ['12.5', 125], ['1003.0', 10_030], ['0.1', 1], ['2.50', 25]])('reads %s as %i', (grams, tenths) => {
    expect(tenthsOf(grams)).toBe(tenths)
  })

  it.each(['', '-1', '1.25', '1,5', 'a', '.5'])('refuses %j', (grams) => expect(() => tenthsOf(grams)).toThrow(RangeError))

  it('prints what it reads', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 10_000_000 }), (tenths) => tenthsOf(gramsOf(tenths)) === tenths))
  })

  it.each([[10, 4, 1, 3], [9, 4, 1, 2], [1049, 1, 10, 1050], [1044, 1, 10, 1040], [1045, 1, 10, 1050]])(
    'takes %i ÷ %i to the nearest %i: %i', (numerator, denominator, step, result) => expect(nearest(numerator, denominator, step)).toBe(result),
  )
})
