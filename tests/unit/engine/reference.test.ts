import { describe, expect, it } from 'vitest'
import { chemistryRules } from '#shared/reference/chemistry-rules'
import { grits } from '#shared/reference/grits'
import { flammableLiquidLabels, hazardStatements, hazardText } from '#shared/reference/hazard-statements'
import { D } from '#shared/engine/decimal'
import { engineVersion } from '#shared/engine/version'
import { addMinutes, minutesToMs, msToMinutes, toIso, toMs } from '#shared/utils/instant'
import { keepUntil } from '#shared/utils/retention'

describe('hazard statements', () => {
  it('carry their kind, and text that fits the record', () => {
    for (const { code, kind, text } of hazardStatements) {
      expect(code).toMatch(kind === 'H' ? /^H[234]\d\d[A-Za-z]{0,2}$/ : kind === 'EUH' ? /^EUH\d{3}A?$/ : /^P\d{3}(\+P\d{3})*$/)
      expect(text.length).toBeGreaterThan(8)
      expect(text.length).toBeLessThanOrEqual(500)
    }
  })

  it('have the sentences of every flammable liquid label', () => {
    for (const { hazard, prevention } of Object.values(flammableLiquidLabels)) {
      for (const code of [hazard, ...prevention]) expect(hazardText(code)).not.toBeNull()
    }
    expect(flammableLiquidLabels[2]).toMatchObject({ signal: 'Danger', hazard: 'H225' })
  })

  it('know no code that is not there', () => {
    expect([hazardText('H999'), hazardText('toString')]).toEqual([null, null])
  })
})

it('grits run from coarse to fine', () => {
  const grains = grits.map(({ averageUm }) => new D(averageUm))
  grains.slice(1).forEach((grain, index) => expect(grain.lt(grains[index]!)).toBe(true))
})

it('chemistry rules name each pair once for each place, with advice that fits the record', () => {
  const keys = chemistryRules.map(({ scope, first, second }) => `${scope} ${first} ${second}`)
  expect(new Set(keys).size).toBe(keys.length)
  for (const { advice } of chemistryRules) expect(advice.length).toBeLessThanOrEqual(400)
})

it('the engine names its version', () => {
  expect(engineVersion).toMatch(/^\d+\.\d+\.\d+$/)
})

describe('instants', () => {
  it('go from text to milliseconds and back', () => {
    expect(toIso(toMs('2026-11-17T07:53:00.250Z'))).toBe('2026-11-17T07:53:00.250Z')
    expect(() => toMs('yesterday')).toThrow(RangeError)
  })

  it('minutes become whole milliseconds, down unless told otherwise', () => {
    expect([minutesToMs('1.5'), minutesToMs('84.852813742386'), minutesToMs('84.852813742386', 'up')]).toEqual([90_000, 5_091_168, 5_091_169])
    expect(msToMinutes(5_091_168)).toBe('84.852')
    expect(addMinutes(1000, '0.5')).toBe(31_000)
  })
})

describe('retention', () => {
  it.each([
    ['2026-12-01', 5, '2031-12-01'], ['2028-02-29', 5, '2033-02-28'], ['2028-02-29', 4, '2032-02-29'], ['2096-02-29', 4, '2100-02-28'],
  ])('a record of %s for %i years: until %s', (day, years, until) => {
    expect(keepUntil(day, years)).toBe(until)
  })

  it('takes days only', () => {
    expect(() => keepUntil('1 Dec 2026')).toThrow(RangeError)
  })
})
