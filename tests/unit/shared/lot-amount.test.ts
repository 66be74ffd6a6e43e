import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { D } from '#shared/engine/decimal'
import { gramsOfKilograms, gramsOfLitres } from '#shared/utils/lot-amount'

describe('grams of a delivery', () => {
  it('are litres by density, worked by hand: 5 L at 1.18 g/mL are 5 900 g', () => {
    expect(gramsOfLitres('5', '1.18')).toBe('5900')
    expect(gramsOfLitres('0.75', '0.87125')).toBe('653.4375')
  })

  it('are kilograms a thousandfold, without a float on the way', () => {
    expect(gramsOfKilograms('0.1')).toBe('100')
    expect(gramsOfKilograms('25.0003')).toBe('25000.3')
  })

  it('never have more decimals than the record keeps, and never stray by more than half of the last', () => {
    const decimal = (most: number, places: number) => fc.integer({ min: 1, max: most }).map(n => new D(n).div(new D(10).pow(places)).toString())
    fc.assert(fc.property(decimal(9_999_999, 4), decimal(300_000, 5), (litres, density) => {
      const grams = new D(gramsOfLitres(litres, density))
      expect(grams.decimalPlaces()).toBeLessThanOrEqual(4)
      expect(grams.minus(new D(litres).times(1000).times(density)).abs().lte('0.00005')).toBe(true)
    }))
  })
})
