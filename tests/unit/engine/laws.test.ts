import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { calculateBatch, planBatch } from '#shared/engine/batch'
import { D, sum } from '#shared/engine/decimal'
import { convertBasis, readMix } from '#shared/engine/mix'
import { calculatePotLife } from '#shared/engine/pot-life'
import { calculatePots } from '#shared/engine/pots'
import { calculatePour } from '#shared/engine/pour'
import { anyMix, decimal, division, reactingMix } from './builders'

const total = (values: readonly string[]) => sum(values.map(value => new D(value)))

describe('targets', () => {
  it('sum to the printed total, lie on the division, and stay within half a division of the exact grams', () => {
    fc.assert(fc.property(anyMix, decimal(1, 20000, 3), division, (mix, totalG, scaleDivisionG) => {
      const batch = calculateBatch({ mix, totalG, scaleDivisionG })
      expect(total(batch.components.map(({ targetG }) => targetG)).toString()).toBe(batch.targetTotalG)
      expect(batch.components.at(-1)?.runningTotalG).toBe(batch.targetTotalG)
      for (const { targetG, exactG } of batch.components) {
        expect(new D(targetG).mod(scaleDivisionG).isZero()).toBe(true)
        expect(new D(targetG).minus(exactG).abs().lte(new D(scaleDivisionG).div(2).plus('1e-12'))).toBe(true)
      }
    }))
  })

  it('leave shares that sum to 100 % and exact grams that sum to the exact total', () => {
    fc.assert(fc.property(anyMix, decimal(1, 20000, 3), (mix, totalG) => {
      const batch = calculateBatch({ mix, totalG, scaleDivisionG: '0.1' })
      const rounding = new D('1e-12').times(batch.components.length)
      expect(total(batch.components.map(({ sharePct }) => sharePct)).minus(100).abs().lte(rounding)).toBe(true)
      expect(total(batch.components.map(({ exactG }) => exactG)).minus(totalG).abs().lte(rounding)).toBe(true)
    }))
  })

  it('never carry an exponent, NaN or more than 12 decimals', () => {
    fc.assert(fc.property(anyMix, decimal(1, 20000, 3), division, (mix, totalG, scaleDivisionG) => {
      const { components, working, ...rest } = calculateBatch({ mix, totalG, scaleDivisionG })
      const printed = [...components.flatMap(one => Object.values(one)), ...working.map(({ value }) => value), ...Object.values(rest)]
        .filter(value => typeof value === 'string' && !mix.components.some(({ name }) => name === value))
      for (const value of printed) expect(value).toMatch(/^-?\d+(\.\d{1,12})?$/)
    }))
  })

  it('round a true half up even where it came out of a division that does not end', () => {
    // total = area ÷ 60 % = (n + ½) · 7/3, of which three parts of seven are n + ½ g
    fc.assert(fc.property(fc.integer({ min: 0, max: 5000 }), (whole) => {
      const { components } = calculateBatch({
        mix: { basis: 'weight', components: [{ name: 'a', parts: '3' }, { name: 'b', parts: '4' }] },
        areaM2: new D(whole).plus('0.5').times('1.4').toString(), filmWeightGsm: '1', filmWeightIs: 'deposited', coats: 1,
        transferEfficiencyPct: '60', scaleDivisionG: '1',
      })
      expect(components[0]?.targetG).toBe(String(whole + 1))
    }))
  })
})

describe('amounts', () => {
  const film = { filmWeightGsm: '120', filmWeightIs: 'deposited' as const, coats: 2, transferEfficiencyPct: '60', scaleDivisionG: '0.1' }

  it('without residue scale with the area', () => {
    fc.assert(fc.property(anyMix, decimal(1, 500, 2), fc.integer({ min: 2, max: 9 }), (mix, areaM2, times) => {
      const one = calculateBatch({ mix, areaM2, ...film })
      const many = calculateBatch({ mix, areaM2: new D(areaM2).times(times).toString(), ...film })
      const gap = new D(one.exactTotalG).times(times).minus(many.exactTotalG).abs()
      expect(gap.lte(new D('1e-12').times(times))).toBe(true)
    }))
  })

  it('by total grams return the area they came from', () => {
    fc.assert(fc.property(anyMix, decimal(1, 500, 2), decimal(0, 200, 1), decimal(0, 30, 1), (mix, areaM2, reserveG, reservePct) => {
      const { exactTotalG } = calculateBatch({ mix, areaM2, reserveG, reservePct, ...film })
      const back = planBatch({ mix, totalG: exactTotalG, reserveG, reservePct, ...film })
      expect(new D(back.areaM2!).minus(areaM2).abs().lte('1e-9')).toBe(true)
    }))
  })

  it('by what is left never ask for more of that component than there is', () => {
    fc.assert(fc.property(anyMix, decimal(6, 5000, 3), division, (mix, grams, scaleDivisionG) => {
      const index = mix.components.length - 1
      const batch = calculateBatch({ mix, available: { index, grams }, scaleDivisionG })
      const target = new D(batch.components[index]!.targetG)
      expect(target.lte(grams)).toBe(true)
      expect(target.gt(new D(grams).minus(scaleDivisionG))).toBe(true)
    }))
  })
})

describe('the scale', () => {
  it('can judge every component at the smallest total, and not one division below', () => {
    fc.assert(fc.property(anyMix, division, (mix, scaleDivisionG) => {
      const { smallestTotalG } = calculateBatch({ mix, totalG: '1', scaleDivisionG })
      const at = (totalG: D_) => calculateBatch({ mix, totalG: totalG.toString(), scaleDivisionG }).tooSmallForScale
      const smallest = new D(smallestTotalG!)
      expect(at(smallest)).toBe(false)
      const below = smallest.minus(scaleDivisionG)
      if (below.gt(0)) expect(at(below)).toBe(true)
    }))
  })
})

type D_ = InstanceType<typeof D>

describe('weight and volume', () => {
  it('weight → volume → weight returns', () => {
    fc.assert(fc.property(anyMix, (input) => {
      const mix = readMix(input)
      const volume = convertBasis(mix, 'volume').map(part => part.toSignificantDigits(30).toString())
      const again = convertBasis(readMix({
        basis: 'volume',
        components: input.components.map((one, index) => ({ ...one, parts: volume[index]! })),
      }), 'weight')
      const weight = convertBasis(mix, 'weight')
      again.forEach((part, index) => {
        const expected = weight[index]!.times(again[0]!).div(weight[0]!)
        expect(part.minus(expected).abs().lte(expected.times('1e-25'))).toBe(true)
      })
    }))
  })
})

describe('corrections', () => {
  const overPour = fc.tuple(reactingMix, decimal(100, 5000, 1), fc.constantFrom('0.1', '0.5', '1'), decimal(3, 60, 0), fc.nat({ max: 2 }))

  it('only add, and followed to the gram leave every component in tolerance, or say that the scale is too coarse', () => {
    let settled = 0
    fc.assert(fc.property(overPour, ([mix, targetTotalG, scaleDivisionG, overPct, which]) => {
      const over = Math.min(which, mix.components.length - 1)
      const { components } = calculateBatch({ mix, totalG: targetTotalG, scaleDivisionG })
      const poured = components.slice(0, over + 1).map(({ targetG }, index) => ({
        index,
        pouredG: index === over
          ? new D(targetG).times(new D(100).plus(overPct)).div(100).toNearest(scaleDivisionG).toString()
          : targetG,
      }))
      const first = calculatePour({ mix, scaleDivisionG, targetTotalG, poured })
      for (const { addG } of first.components) expect(new D(addG).gte(0)).toBe(true)
      if (!first.correctionNeeded || first.tooCoarseForScale) return
      settled += 1
      const followed = first.components.map(({ pouredG, addG }, index) =>
        ({ index, pouredG: new D(pouredG ?? 0).plus(addG).toString() }))
      const after = calculatePour({ mix, scaleDivisionG, targetTotalG: first.newTotalG, poured: followed })
      expect(after.components.slice(1).map(({ verdict }) => verdict))
        .toEqual(after.components.slice(1).map(() => 'in-tolerance'))
      expect(after.correctionNeeded).toBe(false)
      expect(total(followed.map(({ pouredG }) => pouredG)).toString()).toBe(first.newTotalG)
    }), { numRuns: 500 })
    expect(settled).toBeGreaterThan(50)
  })

  it('are not asked for while everything is poured to the target it has when its turn comes', () => {
    fc.assert(fc.property(anyMix, decimal(1, 5000, 1), division, (mix, targetTotalG, scaleDivisionG) => {
      const poured: { index: number, pouredG: string }[] = []
      for (const index of mix.components.keys()) {
        const { components } = calculatePour({ mix, scaleDivisionG, targetTotalG, poured })
        poured.push({ index, pouredG: components[index]!.targetG })
      }
      const pour = calculatePour({ mix, scaleDivisionG, targetTotalG, poured })
      expect(pour.correctionNeeded).toBe(false)
      expect(pour.complete).toBe(true)
      for (const { verdict } of pour.components) expect(['in-tolerance', 'cannot-tell']).toContain(verdict)
    }))
  })
})

describe('pots', () => {
  const job = fc.record({
    mix: reactingMix,
    areas: fc.array(decimal(1, 3, 3), { minLength: 1, maxLength: 40 }),
    gsm: decimal(80, 250, 0),
    residueG: decimal(0, 80, 0),
    cupCapacityG: decimal(1500, 4000, 0),
    paceM2PerH: decimal(8, 40, 1),
    potLifeMin: decimal(60, 300, 0),
    scaleDivisionG: fc.constantFrom('0.1', '1'),
    inductionMin: decimal(0, 10, 0),
    mixToSprayMin: decimal(0, 10, 0),
  })
  const inputOf = ({ areas, gsm, ...rest }: typeof job extends fc.Arbitrary<infer T> ? T : never) => {
    const areaM2 = total(areas)
    return { ...rest, areaM2: areaM2.toString(), sprayG: areaM2.times(gsm).toString() }
  }

  it('conserve the exact total within half a division for each component of each pot', () => {
    fc.assert(fc.property(job, fc.boolean(), (given, onPieces) => {
      const input = { ...inputOf(given), ...(onPieces ? { pieceAreasM2: given.areas } : {}) }
      const { pots } = calculatePots(input)
      const meant = new D(input.sprayG).plus(new D(input.residueG).times(pots.length))
      const bound = new D(input.scaleDivisionG).times(pots.length * input.mix.components.length).div(2)
      expect(total(pots.map(({ totalG }) => totalG)).minus(meant).abs().lte(bound)).toBe(true)
      expect(total(pots.map(({ areaM2 }) => areaM2)).minus(input.areaM2).abs().lte('1e-9')).toBe(true)
    }), { numRuns: 60 })
  })

  it('none is late by its own log, none overflows, none is mixed before the one before it is sprayed', () => {
    fc.assert(fc.property(job, fc.boolean(), (given, onPieces) => {
      const input = { ...inputOf(given), ...(onPieces ? { pieceAreasM2: given.areas } : {}) }
      const { pots } = calculatePots(input)
      const lateAfter = new D(input.potLifeMin).times('0.75')
      pots.forEach(({ totalG, areaM2, startsAfterMin }, index) => {
        const sprayMin = new D(areaM2).times(60).div(input.paceM2PerH)
        expect(sprayMin.plus(input.inductionMin).plus(input.mixToSprayMin).lte(lateAfter.plus('1e-9'))).toBe(true)
        expect(new D(totalG).lte(input.cupCapacityG)).toBe(true)
        const next = pots[index + 1]
        if (next !== undefined) {
          expect(new D(next.startsAfterMin!).minus(startsAfterMin!).minus(sprayMin).abs().lte('1e-9')).toBe(true)
        }
      })
    }), { numRuns: 60 })
  })
})

describe('pot life', () => {
  const sheet = fc.record({ referenceMin: decimal(5, 3000, 0), referenceC: decimal(15, 25, 0), halvesPerC: decimal(5, 20, 0) })
  const table = fc.uniqueArray(fc.integer({ min: 5, max: 40 }), { minLength: 1, maxLength: 6 }).chain(degrees =>
    fc.array(fc.integer({ min: 5, max: 2000 }), { minLength: degrees.length, maxLength: degrees.length }).map((minutes) => {
      const falling = [...minutes].sort((a, b) => b - a)
      return [...degrees].sort((a, b) => a - b).map((c, index) => ({ c: String(c), min: String(falling[index]) }))
    }))
  const degrees = decimal(-10, 60, 1)

  it('never grows with temperature, from a single value or from a table', () => {
    fc.assert(fc.property(fc.oneof(sheet, table.map(rows => ({ table: rows }))), degrees, degrees, (input, a, b) => {
      const [cold, warm] = new D(a).lte(b) ? [a, b] : [b, a]
      const at = (temperatureC: string) => new D(calculatePotLife({ ...input, temperatureC }).potLifeMin)
      expect(at(warm).lte(at(cold))).toBe(true)
      expect(at(warm).gt(0)).toBe(true)
    }), { numRuns: 500 })
  })

  it('is never longer than the sheet says anywhere', () => {
    fc.assert(fc.property(table, degrees, (rows, temperatureC) => {
      const longest = rows.reduce((most, { min }) => (new D(min).gt(most) ? new D(min) : most), new D(0))
      expect(new D(calculatePotLife({ table: rows, temperatureC }).potLifeMin).lte(longest)).toBe(true)
    }))
  })
})
