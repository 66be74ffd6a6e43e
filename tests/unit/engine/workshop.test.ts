import convert from 'convert-units'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { additionVerdict, checkPouringOrder, pouringOrder } from '#shared/engine/chemistry'
import { clashOf } from '#shared/engine/chemistry-clash'
import { UNMEASURED_CLEARANCE_MS, clearanceOf } from '#shared/engine/clearance'
import type { ExtractionChange } from '#shared/engine/clearance'
import { calculateDewPoint } from '#shared/engine/climate'
import { costOf, costPerM2 } from '#shared/engine/cost'
import { D } from '#shared/engine/decimal'
import { arrivedCoatWeightGsm, measuredEfficiency, oversprayOf } from '#shared/engine/gun'
import { readMix } from '#shared/engine/mix'
import { convertUnit } from '#shared/engine/units'
import type { Unit } from '#shared/engine/units'
import { calculateViscosity, inCupRange } from '#shared/engine/viscosity'
import type { Cup } from '#shared/engine/viscosity'
import { chemistryRules } from '#shared/reference/chemistry-rules'
import { byWeight, decimal, refusal, thrownBy } from './builders'

describe('a gun', () => {
  it('is measured by solids, or estimated wet', () => {
    expect(measuredEfficiency({ gainG: '48', usedG: '200', solidsPct: '40' })).toEqual({ transferEfficiencyPct: '60', estimate: false })
    expect(measuredEfficiency({ gainG: '90', usedG: '200' })).toEqual({ transferEfficiencyPct: '45', estimate: true })
    expect(thrownBy(() => measuredEfficiency({ gainG: '81', usedG: '200', solidsPct: '40' }))).toMatchObject(refusal('gained-more-than-left', 'gainG'))
  })

  it('brings so much to the panel: 4 380 g less 40 and 20 at 60 % on 21.6 m² are 120 g/m²', () => {
    const pot = { mixedG: '4380', leftoverG: '40', washedOutG: '20', transferEfficiencyPct: '60', areaM2: '21.6', coats: 1 }
    expect(arrivedCoatWeightGsm(pot)).toBe('120')
    expect(arrivedCoatWeightGsm({ ...pot, coats: 2 })).toBe('60')
    expect(thrownBy(() => arrivedCoatWeightGsm({ ...pot, leftoverG: '4380' }))).toMatchObject(refusal('more-left-than-mixed', 'leftoverG'))
    expect(oversprayOf('100', '60')).toBe('40')
  })
})

describe('viscosity', () => {
  const cups: Cup[] = ['iso-3', 'iso-4', 'iso-5', 'iso-6', 'ford-1', 'ford-2', 'ford-3', 'ford-4', 'ford-5', 'din-4', 'zahn-1', 'zahn-2', 'zahn-3', 'zahn-4', 'zahn-5']

  it('25 s of the DIN 4 mm cup are about 96 mm²/s', () => {
    expect(calculateViscosity({ cup: 'din-4', seconds: '25' })).toEqual({ mm2PerS: '96.17', approximate: true })
  })

  it('goes to another cup and back', () => {
    const first = calculateViscosity({ cup: 'iso-4', seconds: '60', toCup: 'ford-4' })
    const back = calculateViscosity({ cup: 'ford-4', seconds: first.toSeconds!, toCup: 'iso-4' })
    expect(new D(back.toSeconds!).minus(60).abs().lte('1e-9')).toBe(true)
  })

  it('rises with the seconds in every cup, within its range', () => {
    fc.assert(fc.property(fc.constantFrom(...cups), decimal(20, 150, 1), decimal(20, 150, 1), (cup, a, b) => {
      fc.pre(inCupRange(cup, a) && inCupRange(cup, b) && new D(a).lt(b))
      const [low, high] = [a, b].map(seconds => new D(calculateViscosity({ cup, seconds }).mm2PerS))
      expect(low!.gt(0)).toBe(true)
      expect(low!.lt(high!)).toBe(true)
    }))
  })

  it('out of a cup\'s range the conversion is refused, at either end', () => {
    expect(thrownBy(() => calculateViscosity({ cup: 'iso-4', seconds: '29.9' }))).toMatchObject(refusal('out-of-cup-range', 'seconds'))
    expect(thrownBy(() => calculateViscosity({ cup: 'iso-4', seconds: '100.1' }))).toMatchObject(refusal('out-of-cup-range', 'seconds'))
    expect(thrownBy(() => calculateViscosity({ cup: 'zahn-5', seconds: '80', toCup: 'zahn-1' }))).toMatchObject(refusal('out-of-cup-range', 'toCup'))
  })
})

describe('dew point', () => {
  it('23 °C and 50 % is 12.0 °C; a surface 3 K above it is just enough', () => {
    const { dewPointC } = calculateDewPoint({ airC: '23', rhPct: '50' })
    expect(new D(dewPointC).toDecimalPlaces(1).toString()).toBe('12')
    const at = (above: string) => calculateDewPoint({ airC: '23', rhPct: '50', surfaceC: new D(dewPointC).plus(above).toString() }).ok
    expect([at('3.000001'), at('2.999999')]).toEqual([true, false])
    expect(calculateDewPoint({ airC: '23', rhPct: '50' })).toMatchObject({ marginC: null, ok: null })
  })

  it('is the air\'s own temperature at 100 %, and never above it', () => {
    fc.assert(fc.property(decimal(-20, 50, 1), decimal(1, 100, 1), (airC, rhPct) => {
      const dew = new D(calculateDewPoint({ airC, rhPct }).dewPointC)
      expect(dew.lte(new D(airC).plus('1e-9'))).toBe(true)
    }))
    expect(calculateDewPoint({ airC: '18.5', rhPct: '100' }).dewPointC).toBe('18.5')
  })

  it.each([['airC', { airC: '60.1', rhPct: '50' }], ['rhPct', { airC: '20', rhPct: '0' }], ['rhPct', { airC: '20', rhPct: '100.1' }]])('refuses %s out of range', (field, input) => {
    expect(thrownBy(() => calculateDewPoint(input))).toMatchObject({ name: 'EngineError', field })
  })
})

describe('units', () => {
  const families: Unit[][] = [
    ['g', 'kg', 'oz', 'lb'], ['mL', 'L', 'fl-oz-us', 'gal-us', 'gal-imp'], ['m2', 'ft2'], ['um', 'mm', 'mil', 'in'],
    ['g/L', 'g/mL', 'lb/gal-us'], ['m/s', 'ft/min'], ['degC', 'degF'],
  ]

  it('go there and back', () => {
    fc.assert(fc.property(fc.constantFrom(...families).chain(family => fc.tuple(fc.constantFrom(...family), fc.constantFrom(...family))), decimal(1, 1000, 2), ([from, to], value) => {
      const back = new D(convertUnit(convertUnit(value, from, to), to, from))
      expect(back.minus(value).abs().lte('1e-7')).toBe(true)
    }))
  })

  it.each([
    ['1', 'lb', 'oz', '16'], ['1', 'gal-us', 'fl-oz-us', '128'], ['1', 'in', 'mil', '1000'], ['1', 'kg', 'g', '1000'],
    ['212', 'degF', 'degC', '100'], ['-40', 'degC', 'degF', '-40'], ['1', 'g/mL', 'g/L', '1000'], ['100', 'ft/min', 'm/s', '0.508'],
  ] as const)('%s %s in %s: %s', (value, from, to, expected) => {
    expect(convertUnit(value, from, to)).toBe(expected)
  })

  it('that measure different things are refused', () => {
    expect(thrownBy(() => convertUnit('1', 'g', 'mL'))).toMatchObject(refusal('units-differ', 'to'))
  })

  it('convert-units is near enough for the eye in these', () => {
    const relative = (library: number, exact: string) => new D(String(library)).minus(exact).div(exact).abs()
    expect(relative(convert(1).from('ft2').to('m2'), convertUnit('1', 'ft2', 'm2')).lte('1e-5')).toBe(true)
    expect(relative(convert(1).from('gal').to('l'), convertUnit('1', 'gal-us', 'L')).lte('1e-5')).toBe(true)
    expect(relative(convert(1).from('lb').to('g'), convertUnit('1', 'lb', 'g')).lte('1e-5')).toBe(true)
  })

  it('convert-units is not exact enough for the record: ounces and pounds are off, sums carry binary noise', () => {
    const off = (library: number, exact: string) => new D(String(library)).minus(exact).div(exact).abs()
    expect(off(convert(1).from('oz').to('g'), convertUnit('1', 'oz', 'g')).gt('1e-7')).toBe(true)
    expect(off(convert(1).from('lb').to('g'), convertUnit('1', 'lb', 'g')).gt('1e-7')).toBe(true)
    const noisy = [0.1, 0.7, 1.1, 2.3, 4.35].some(value =>
      String(convert(value).from('kg').to('g')) !== convertUnit(String(value), 'kg', 'g')
      || String(convert(value).from('g').to('kg')) !== convertUnit(String(value), 'g', 'kg')
      || String(convert(value).from('l').to('ml')) !== convertUnit(String(value), 'L', 'mL'))
    expect(noisy).toBe(true)
  })
})

describe('cost', () => {
  it('sums grams of each lot at its own price', () => {
    const lines = [{ grams: '500', pricePerKg: '9' }, { grams: '250', pricePerKg: '14' }, { grams: '100', pricePerKg: '4' }]
    expect(costOf(lines)).toBe('8.4')
    expect(costPerM2(lines, '4.25')).toBe('1.976470588235')
    expect(costOf([])).toBe('0')
    expect(thrownBy(() => costOf([{ grams: '-1', pricePerKg: '9' }]))).toMatchObject(refusal('too-small', 'lines.0.grams'))
  })
})

describe('chemistry', () => {
  it.each(['oil', 'polyurethane', 'uv', 'polyester'])('nitrocellulose and %s never follow each other in a booth unless it was cleaned', (other) => {
    expect(clashOf(chemistryRules, 'booth', 'nitrocellulose', other)?.verdict).toBe('blocked')
    expect(clashOf(chemistryRules, 'booth', other, 'nitrocellulose')?.verdict).toBe('blocked')
    expect(clashOf(chemistryRules, 'booth', 'nitrocellulose', other, true)).toBeNull()
    expect(clashOf(chemistryRules, 'bin', other, 'nitrocellulose', true)?.verdict).toBe('blocked')
  })

  it('an ordered rule holds one way round, the strictest rule wins, and nothing is no clash', () => {
    expect(clashOf(chemistryRules, 'adjacent-steps', 'nitrocellulose', 'polyurethane')?.verdict).toBe('caution')
    expect(clashOf(chemistryRules, 'adjacent-steps', 'polyurethane', 'nitrocellulose')).toBeNull()
    expect(clashOf(chemistryRules, 'booth', 'nitrocellulose', 'nitrocellulose')).toBeNull()
    const both = [{ ...chemistryRules[0]!, verdict: 'caution' as const, advice: 'mild' }, chemistryRules[0]!]
    expect(clashOf(both, 'booth', chemistryRules[0]!.first, chemistryRules[0]!.second)?.verdict).toBe('blocked')
  })

  const polyester = readMix(byWeight(['2', '100', '2', '10'], [
    { role: 'peroxide', tolerancePct: '5' }, { role: 'base' }, { role: 'accelerator' }, { role: 'thinner' },
  ]))

  it('accelerator goes into the base and is stirred, peroxide comes last after stirring', () => {
    expect(pouringOrder(polyester)).toEqual([
      { kind: 'pour', index: 1 }, { kind: 'pour', index: 2 }, { kind: 'stir' }, { kind: 'pour', index: 3 }, { kind: 'stir' }, { kind: 'pour', index: 0 },
    ])
    const without = readMix(byWeight(['100', '2', '2'], [{}, { role: 'accelerator' }, { role: 'peroxide', tolerancePct: '5' }]))
    expect(pouringOrder(without)).toEqual([
      { kind: 'pour', index: 0 }, { kind: 'pour', index: 1 }, { kind: 'stir' }, { kind: 'pour', index: 2 },
    ])
    expect(pouringOrder(readMix(byWeight(['100', '50', '20'])))).toEqual([0, 1, 2].map(index => ({ kind: 'pour', index })))
  })

  it('refuses an order in which the two meet, either way round, and passes its own', () => {
    const meet = (a: number, b: number) => () => checkPouringOrder(polyester, [{ kind: 'pour', index: 1 }, { kind: 'pour', index: a }, { kind: 'pour', index: b }])
    expect(thrownBy(meet(2, 0))).toMatchObject(refusal('accelerator-meets-peroxide', 'steps.2'))
    expect(thrownBy(meet(0, 2))).toMatchObject(refusal('accelerator-meets-peroxide', 'steps.2'))
    expect(checkPouringOrder(polyester, pouringOrder(polyester))).toBeUndefined()
    expect(thrownBy(meet(7, 0))).toMatchObject(refusal('component-unknown', 'steps.1'))
  })

  it('accelerator and peroxide keep their per-cent limits on the base', () => {
    const at = (addedG: string) => additionVerdict({ baseG: '1000', addedG, minPct: '1', maxPct: '3' })
    expect(['9.9', '10', '30', '30.1'].map(at)).toEqual(['below', 'within', 'within', 'above'])
  })
})

describe('booth clearance after isocyanates', () => {
  const MIN = 60_000
  const running = (at: number): ExtractionChange => ({ at: at * MIN, extraction: 'running' })
  const off = (at: number, extraction: 'stopped' | 'unknown' = 'stopped'): ExtractionChange => ({ at: at * MIN, extraction })
  const at = (now: number, changes: ExtractionChange[], clearanceMin: number | null = 10) =>
    clearanceOf({ lastShotAt: 100 * MIN, clearanceMs: clearanceMin === null ? null : clearanceMin * MIN, changes, now: now * MIN })

  it('counts the measured time from the last shot', () => {
    expect(at(104, [running(0)])).toEqual({ state: 'counting', clearAt: 110 * MIN, remainingMs: 6 * MIN })
    expect(at(110, [running(0)])).toEqual({ state: 'clear', clearAt: 110 * MIN, remainingMs: 0 })
  })

  it('takes 30 minutes where none was measured', () => {
    expect(at(104, [running(0)], null).clearAt).toBe(100 * MIN + UNMEASURED_CLEARANCE_MS)
  })

  it('rests while the extraction is off or unknown, and begins anew when it runs', () => {
    expect(at(106, [running(0), off(105)])).toEqual({ state: 'stopped', clearAt: null, remainingMs: 10 * MIN })
    expect(at(106, [running(0), off(105, 'unknown')]).state).toBe('stopped')
    expect(at(106, []).state).toBe('stopped')
    expect(at(109, [running(0), off(105), running(107)])).toEqual({ state: 'counting', clearAt: 117 * MIN, remainingMs: 8 * MIN })
  })

  it('stays clear when the extraction is switched off afterwards', () => {
    expect(at(130, [running(0), off(120)])).toMatchObject({ state: 'clear', clearAt: 110 * MIN })
  })

  it('refuses changes out of order', () => {
    expect(thrownBy(() => at(110, [running(50), off(40)]))).toMatchObject(refusal('changes-order', 'changes.1.at'))
  })
})
