import Decimal from 'decimal.js'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addUp, decimalsNeeded, digitsOf, isMoreThanNone, roundedText, unitsOf, withScale } from '#shared/utils/decimal-text'
import { minutesToMs, msToMinutes } from '#shared/utils/instant'

const plain = fc.tuple(fc.constantFrom('', '-'), fc.bigInt({ min: 0n, max: 10n ** 30n }), fc.nat({ max: 14 })).map(([sign, digits, scale]) => {
  const text = String(digits).padStart(scale + 1, '0')
  return scale === 0 ? sign + text : `${sign}${text.slice(0, -scale)}.${text.slice(-scale)}`
})

const Exact = Decimal.clone({ precision: 80, rounding: Decimal.ROUND_HALF_UP })

describe('decimals by their digits', () => {
  it('round as the reckoning library does, at every place', () => {
    fc.assert(fc.property(plain, fc.nat({ max: 16 }), (value, decimals) => {
      const { whole, fraction } = digitsOf(withScale(unitsOf(value), decimals))
      expect(fraction === '' ? whole : `${whole}.${fraction}`).toBe(new Exact(value).abs().toFixed(decimals))
    }))
  })

  it('need as many decimals as are not zeros at the end', () => {
    fc.assert(fc.property(plain, (value) => {
      expect(decimalsNeeded(unitsOf(value))).toBe(new Exact(value).decimalPlaces())
    }))
  })

  it('add up as the reckoning library does', () => {
    fc.assert(fc.property(fc.array(plain, { maxLength: 8 }), (values) => {
      const total = values.reduce((sum, value) => sum.plus(value), new Exact(0))
      expect(addUp(values)).toBe(total.isZero() ? '0' : total.toFixed())
    }))
  })

  it('are cut to what the eye needs, half away from zero, without zeros at the end', () => {
    fc.assert(fc.property(plain, fc.nat({ max: 16 }), (value, decimals) => {
      const rounded = new Exact(value).toDecimalPlaces(decimals)
      expect(roundedText(value, decimals)).toBe(rounded.isZero() ? '0' : rounded.toFixed())
    }))
  })

  it('are more than none above zero only', () => {
    fc.assert(fc.property(plain, (value) => {
      expect(isMoreThanNone(value)).toBe(new Exact(value).gt(0))
    }))
  })

  it.each(['', '-', '.', 'abc', '1,5', 'NaN', 'Infinity', '1e3', ' 1', '1.2.3'])('are not read from %j', (value) => {
    expect(() => unitsOf(value)).toThrow(RangeError)
  })
})

describe('minutes and milliseconds', () => {
  it('round down or up as asked', () => {
    fc.assert(fc.property(plain, (value) => {
      const exact = new Exact(value).times(60_000)
      expect(minutesToMs(value)).toBe(exact.floor().toNumber() + 0)
      expect(minutesToMs(value, 'up')).toBe(exact.ceil().toNumber() + 0)
    }))
  })

  it('go back to minutes by the thousandth, rounded down', () => {
    fc.assert(fc.property(fc.integer(), (ms) => {
      expect(msToMinutes(ms)).toBe(new Exact(ms).div(60_000).toDecimalPlaces(3, Decimal.ROUND_FLOOR).plus(0).toFixed())
    }))
  })
})
