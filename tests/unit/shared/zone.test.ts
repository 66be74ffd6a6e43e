import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addDays, daysBetween, isZone, shopDate, startOfShopDay } from '../../../shared/utils/zone'

const at = (iso: string): number => Date.parse(iso)
const zones = ['UTC', 'Europe/Copenhagen', 'America/New_York', 'Asia/Kolkata', 'Pacific/Auckland', 'America/St_Johns', 'Pacific/Kiritimati', 'Africa/Cairo', 'America/Santiago']

describe('shopDate', () => {
  it.each([
    ['2026-11-30T22:59:59.999Z', 'Europe/Copenhagen', '2026-11-30'],
    ['2026-11-30T23:00:00.000Z', 'Europe/Copenhagen', '2026-12-01'],
    ['2026-07-01T22:00:00.000Z', 'Europe/Copenhagen', '2026-07-02'],
    ['2026-07-01T22:05:00.000Z', 'Europe/Copenhagen', '2026-07-02'],
    ['2026-12-01T04:59:59.000Z', 'America/New_York', '2026-11-30'],
    ['2026-12-31T10:00:00.000Z', 'Pacific/Kiritimati', '2027-01-01'],
  ])('%s in %s is %s', (iso, zone, day) => {
    expect(shopDate(at(iso), zone)).toBe(day)
  })

  it('refuses a zone that there is not', () => {
    expect(() => shopDate(0, 'Mars/Olympus')).toThrow(RangeError)
    expect(isZone('Mars/Olympus')).toBe(false)
    expect(isZone('Europe/Copenhagen')).toBe(true)
  })
})

describe('startOfShopDay', () => {
  it.each([
    ['2026-12-01', 'Europe/Copenhagen', '2026-11-30T23:00:00.000Z'],
    ['2026-03-29', 'Europe/Copenhagen', '2026-03-28T23:00:00.000Z'],
    ['2026-10-25', 'Europe/Copenhagen', '2026-10-24T22:00:00.000Z'],
    ['2026-10-26', 'Europe/Copenhagen', '2026-10-25T23:00:00.000Z'],
    ['2026-07-01', 'America/New_York', '2026-07-01T04:00:00.000Z'],
  ])('%s in %s begins at %s', (day, zone, iso) => {
    expect(new Date(startOfShopDay(day, zone)).toISOString()).toBe(iso)
  })

  it('is the first instant of its day, in every zone and on every day', () => {
    const instants = fc.integer({ min: at('2015-01-01T00:00:00.000Z'), max: at('2035-01-01T00:00:00.000Z') })
    fc.assert(fc.property(instants, fc.constantFrom(...zones), (ms, zone) => {
      const day = shopDate(ms, zone)
      const start = startOfShopDay(day, zone)
      expect(start).toBeLessThanOrEqual(ms)
      expect(shopDate(start, zone)).toBe(day)
      expect(shopDate(start - 1, zone)).toBe(addDays(day, -1))
    }))
  })
})

describe('calendar days', () => {
  it('counts across months, years and leap days', () => {
    expect(daysBetween('2026-12-01', '2026-12-15')).toBe(14)
    expect(daysBetween('2028-02-28', '2028-03-01')).toBe(2)
    expect(daysBetween('2027-01-01', '2026-12-31')).toBe(-1)
    expect(addDays('2026-12-31', 1)).toBe('2027-01-01')
  })

  it('adding and counting undo each other', () => {
    fc.assert(fc.property(fc.integer({ min: -5000, max: 5000 }), days => daysBetween('2026-12-01', addDays('2026-12-01', days)) === days))
  })

  it('refuses what is no day', () => {
    expect(() => daysBetween('2026-13-40', '2026-12-01')).toThrow(RangeError)
  })
})
