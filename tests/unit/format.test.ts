import { describe, expect, it } from 'vitest'
import { area, calendarDay, clock, clockNear, clockSeconds, day, dayClock, decimalsOf, duration, grams, money, numberParts, over, percent, ratio, weekday, sumText } from '~/utils/format'

const SECOND = 1000
const MIN = 60 * SECOND
const HOUR = 60 * MIN
const DAY = 24 * HOUR
const ZONE = 'Europe/Berlin'

describe('money', () => {
  it('names the currency of the shop, and stands alone where there is none', () => {
    expect(money('1234.5', 'EUR')).toBe('1\u2009234.50\u00A0EUR')
    expect(money('11.205', null)).toBe('11.21')
  })
})

describe('grams', () => {
  it.each([
    ['1490', 1, '1\u2009490.0'],
    ['0', 1, '0.0'],
    ['396.4', 1, '396.4'],
    ['1234567.891', 2, '1\u2009234\u2009567.89'],
    ['999.95', 1, '1\u2009000.0'],
    ['-21.9', 1, '\u221221.9'],
    ['-0.04', 1, '0.0'],
    ['0.15', 1, '0.2'],
    ['12345', 0, '12\u2009345'],
    ['9007199254740993.1', 1, '9\u2009007\u2009199\u2009254\u2009740\u2009993.1'],
  ])('prints %s with %i decimals as %s', (value, decimals, text) => {
    expect(grams(value, decimals)).toBe(text)
  })

  it('keeps the digits as they stand where no decimals are asked for', () => {
    expect(grams('150')).toBe('150')
    expect(grams('150.00')).toBe('150.00')
    expect(grams('2.5')).toBe('2.5')
  })

  it.each(['', 'abc', '1,5', 'NaN', 'Infinity'])('refuses %j', (value) => {
    expect(() => grams(value, 1)).toThrow()
  })
})

describe('numberParts', () => {
  it('groups thousands and keeps sign and decimals apart', () => {
    expect(numberParts('-1490.05', 2)).toEqual({ sign: '\u2212', groups: ['1', '490'], fraction: '05' })
  })

  it('shows a plus only when asked, and none on zero', () => {
    expect(numberParts('5', 1, true).sign).toBe('+')
    expect(numberParts('0', 1, true).sign).toBe('')
    expect(numberParts('5', 1).sign).toBe('')
  })
})

describe('decimalsOf', () => {
  it.each([['0.1', 1], ['0.05', 2], ['1', 0], ['5', 0], ['0.10', 1]])('a division of %s g has %i', (division, decimals) => {
    expect(decimalsOf(division)).toBe(decimals)
  })
})

describe('percent', () => {
  it.each([
    ['5', { decimals: 1, signed: true }, '+5.0\u00A0%'],
    ['-6.149', { decimals: 1, signed: true }, '\u22126.1\u00A0%'],
    ['0', { decimals: 1, signed: true }, '0.0\u00A0%'],
    ['65', {}, '65\u00A0%'],
  ])('prints %s as %s', (value, options, text) => {
    expect(percent(value, options)).toBe(text)
  })
})

describe('area and ratio', () => {
  it('prints an area with two decimals', () => expect(area('21.6')).toBe('21.60'))

  it.each([
    [['100', '50', '20'], '100 : 50 : 20'],
    [['100', '25', ['20', '30']], '100 : 25 : 20–30'],
    [['100.0', '12.50'], '100 : 12.5'],
  ] as const)('prints %j', (parts, text) => {
    expect(ratio(parts)).toBe(text)
  })
})

describe('duration', () => {
  it.each([
    [0, '0 min'], [-5 * MIN, '0 min'], [45 * SECOND, '0 min 45'], [4 * MIN + 30 * SECOND, '4 min 30'], [4 * MIN + 5 * SECOND, '4 min 05'],
    [9 * MIN + 59 * SECOND, '9 min 59'], [10 * MIN, '10 min'], [10 * MIN + 59 * SECOND, '10 min'], [18 * MIN, '18 min'],
    [HOUR - 1, '59 min'], [HOUR, '1 h'], [2 * HOUR + 6 * MIN, '2 h 06'], [4 * HOUR, '4 h'], [47 * HOUR + 59 * MIN, '47 h 59'],
    [2 * DAY, '2 d'], [3 * DAY + 4 * HOUR + 59 * MIN, '3 d 4 h'],
  ])('%i ms reads %s', (ms, text) => {
    expect(duration(ms)).toBe(text)
  })

  it('never shows more time than there is, whatever the span', () => {
    let before = ''
    for (let ms = 0; ms < 3 * DAY; ms += 37 * SECOND) {
      const text = duration(ms)
      expect(text).toMatch(/^(\d+ min( \d\d)?|\d+ h( \d\d)?|\d+ d( \d+ h)?)$/)
      expect(text).not.toMatch(/ 60|^60 min/)
      before = text
    }
    expect(before).toBe('2 d 23 h')
  })
})

describe('over', () => {
  it.each([[0, '+0 min'], [59 * SECOND, '+0 min'], [9 * MIN + 40 * SECOND, '+9 min'], [72 * MIN, '+1 h 12'], [50 * HOUR, '+2 d 2 h']])('%i ms past reads %s', (ms, text) => {
    expect(over(ms)).toBe(text)
  })
})

describe('clock and dates in the shop’s zone', () => {
  const winter = Date.UTC(2026, 10, 17, 6, 54, 20)
  const summer = Date.UTC(2026, 6, 1, 22, 5)

  it('reads 24 hours and follows daylight saving', () => {
    expect(clock(winter, ZONE)).toBe('07:54')
    expect(clockSeconds(winter, ZONE)).toBe('07:54:20')
    expect(clock(summer, ZONE)).toBe('00:05')
    expect(clock(summer, 'America/New_York')).toBe('18:05')
  })

  it('names the day of the zone, not of UTC', () => {
    expect(day(winter, ZONE, winter)).toBe('Tue 17 Nov')
    expect(day(summer, ZONE, winter)).toBe('Thu 2 Jul')
    expect(dayClock(winter, ZONE, winter)).toBe('Tue 17 Nov 07:54')
  })

  it('names the weekday of the zone', () => expect(weekday(summer, ZONE)).toBe('Thu'))

  it('gives the year only when it is another', () => {
    expect(day(winter, ZONE, Date.UTC(2027, 0, 2))).toBe('Tue 17 Nov 2026')
    expect(day(Date.UTC(2026, 11, 31, 23, 30), ZONE, Date.UTC(2026, 11, 31, 12))).toBe('Fri 1 Jan 2027')
  })

  it('prints a calendar day with its year and refuses anything else', () => {
    expect(calendarDay('2027-03-31')).toBe('Wed 31 Mar 2027')
    expect(calendarDay('2026-09-01')).toBe('Tue 1 Sep 2026')
    expect(() => calendarDay('31.03.2027')).toThrow(RangeError)
  })
})

describe('clock time near now', () => {
  const now = Date.UTC(2026, 10, 17, 12, 0)
  it.each([
    ['the same day', Date.UTC(2026, 10, 17, 6, 54), '07:54'],
    ['the next day in the shop, the same in UTC', Date.UTC(2026, 10, 17, 23, 30), 'Wed 00:30'],
    ['three days on', Date.UTC(2026, 10, 20, 9, 25), 'Fri 10:25'],
    ['the same weekday of another week', Date.UTC(2026, 10, 24, 6, 54), 'Tue 07:54'],
  ])('%s', (_, at, words) => {
    expect(clockNear(at, 'Europe/Copenhagen', now)).toBe(words)
  })
})

describe('a sum for the eye', () => {
  it.each([
    ['496.551724137931 g × (1 + 0 %) + 24 g', '496.5517… g × (1 + 0 %) + 24 g'],
    ['125 ÷ (100 ÷ 1.25 + 25 ÷ 1.1)', '125 ÷ (100 ÷ 1.25 + 25 ÷ 1.1)'],
    ['0.000123456789', '0.0001234…'],
    ['0.4965', '0.4965'],
    ['1.216814159292', '1.2168…'],
    ['100.0000', '100.0000'],
  ])('shows %s as %s', (text, shown) => {
    expect(sumText(text)).toBe(shown)
  })
})
