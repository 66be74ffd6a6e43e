import { describe, expect, it } from 'vitest'
import { D, print } from '#shared/engine/decimal'
import { canWeigh, handbook44ToleranceD, oimlMpeG, potLimitG, readScale, readingUncertaintyG } from '#shared/engine/scale'
import { bandOf, fitnessOf, judge } from '#shared/engine/verdict'
import { refusal, thrownBy } from './builders'

describe('OIML R 76', () => {
  it.each([
    ['II', '0.1', '500', '0.05'], ['II', '0.1', '500.1', '0.1'], ['II', '0.1', '2000.1', '0.15'],
    ['III', '1', '500', '0.5'], ['III', '1', '501', '1'], ['III', '1', '2001', '1.5'],
    ['I', '0.001', '1000', '0.0015'], ['IIII', '5', '250', '2.5'],
  ] as const)('class %s, e = %s g, %s g → %s g', (oimlClass, e, load, mpe) => {
    expect(print(oimlMpeG(oimlClass, new D(e), new D(load), false))).toBe(mpe)
    expect(print(oimlMpeG(oimlClass, new D(e), new D(load), true))).toBe(print(new D(mpe).times(2)))
  })

  it('refuses a load above the class\'s last band', () => {
    expect(thrownBy(() => oimlMpeG('III', new D(1), new D(10001), false))).toMatchObject(refusal('over-scale-range'))
  })
})

it('NIST Handbook 44 class III steps at 500, 2 000 and 4 000 divisions', () => {
  expect(['500', '501', '2000', '2001', '4000', '4001', '10000'].map(n => print(handbook44ToleranceD(new D(n), true))))
    .toEqual(['1', '2', '2', '3', '3', '5', '5'])
  expect(thrownBy(() => handbook44ToleranceD(new D(10001), true))).toMatchObject(refusal('over-scale-range'))
})

describe('a scale\'s record', () => {
  it('u = d/2, plus the permissible error, twice for a running total', () => {
    const plain = readScale({ divisionG: '0.1' })
    const checked = readScale({ divisionG: '0.1', mpeG: '0.2' })
    expect(print(readingUncertaintyG(plain, new D(100)))).toBe('0.05')
    expect(print(readingUncertaintyG(checked, new D(100)))).toBe('0.25')
    expect(print(readingUncertaintyG(checked, new D(100), 'running'))).toBe('0.5')
  })

  it('weighs up to its capacity and its class', () => {
    const scale = readScale({ divisionG: '1', capacityG: '6000', oimlClass: 'III', verificationIntervalG: '1' })
    expect([6000, 6001].map(load => canWeigh(scale, new D(load)))).toEqual([true, false])
    expect(thrownBy(() => readScale({ divisionG: '1', oimlClass: 'II' }))).toMatchObject(refusal('interval-missing', 'scaleVerificationIntervalG'))
  })

  it('and the cup bound a pot: the least of cup, fill line, volume and what the scale still carries', () => {
    const scale = readScale({ divisionG: '1', capacityG: '3000' })
    const limit = (cup: Parameters<typeof potLimitG>[0]) => print(potLimitG(cup, scale, new D('1.2'))!)
    expect(limit({ cupCapacityG: '2500', fillLinePct: '80' })).toBe('2000')
    expect(limit({ cupCapacityMl: '2000' })).toBe('2400')
    expect(limit({ cupCapacityG: '5000', cupTareG: '140' })).toBe('2860')
    expect(potLimitG({}, readScale({ divisionG: '1' }), null)).toBeNull()
    expect(thrownBy(() => potLimitG({ cupCapacityMl: '500' }, scale, null))).toMatchObject(refusal('density-missing', 'cupCapacityMl'))
    expect(thrownBy(() => potLimitG({ cupTareG: '3000' }, scale, null))).toMatchObject(refusal('cup-over-scale', 'cupTareG'))
  })
})

describe('a verdict on 100 g ± 5 % with u = 1 g', () => {
  const band = bandOf(new D(100), new D(5))
  it.each([
    ['93.9', 'short'], ['94', 'cannot-tell'], ['95.9', 'cannot-tell'], ['96', 'in-tolerance'], ['100', 'in-tolerance'],
    ['104', 'in-tolerance'], ['104.1', 'cannot-tell'], ['106', 'cannot-tell'], ['106.1', 'too-much'],
  ])('%s g: %s', (poured, verdict) => {
    expect(judge(new D(poured), band, new D(1))).toBe(verdict)
  })

  it('with a range reaches to the range\'s high end, or to the tolerance where that is more', () => {
    expect(judge(new D(130), bandOf(new D(100), new D(5), new D(150)), new D(1))).toBe('in-tolerance')
    expect(judge(new D(152), bandOf(new D(100), new D(5), new D(150)), new D(1))).toBe('too-much')
    expect(print(bandOf(new D(100), new D(5), new D(102)).highG)).toBe('105')
  })

  it('fits the scale, is coarse from a third of the tolerance on, too small from all of it on', () => {
    expect(['1.6', '1.7', '5', '5.1'].map(u => fitnessOf(new D(100), new D(5), new D(u)))).toEqual(['fine', 'coarse', 'coarse', 'too-small'])
  })
})
