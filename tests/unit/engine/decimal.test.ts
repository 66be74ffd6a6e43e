import { describe, expect, it } from 'vitest'
import { D, ceilTo, floorTo, print, readCount, readDecimal, readPercent, readPositive, roundTo } from '#shared/engine/decimal'
import { refusal, thrownBy } from './builders'

describe('reading a decimal', () => {
  it.each(['0', '12', '-3.5', '000.10', '1000000000'])('takes %s', (text) => {
    expect(readDecimal(text, 'x').eq(text)).toBe(true)
  })

  it.each(['', ' 1', '1,5', '1e3', '.5', '5.', '+1', 'NaN', 'Infinity', '0x10', '1_000', '१', '--1', '1.2.3', '1\n', '9'.repeat(41)])(
    'refuses %j without repeating it', (text) => {
      const error = thrownBy(() => readDecimal(text, 'areaM2')) as Error
      expect(error).toMatchObject(refusal('not-a-number', 'areaM2'))
      if (text.trim() !== '') expect(error.message).not.toContain(text.trim())
    })

  it.each([undefined, null, 5, {}, []])('refuses %j, which is no text', (value) => {
    expect(thrownBy(() => readDecimal(value as unknown as string, 'x'))).toMatchObject(refusal('not-a-number', 'x'))
  })

  it('holds values between its bounds and never clamps', () => {
    expect(thrownBy(() => readDecimal('1000000000.1', 'x'))).toMatchObject(refusal('too-large'))
    expect(thrownBy(() => readDecimal('-1000000000.1', 'x'))).toMatchObject(refusal('too-small'))
    expect(thrownBy(() => readPositive('0', 'x'))).toMatchObject(refusal('too-small'))
    expect(thrownBy(() => readPercent('100.01', 'x'))).toMatchObject(refusal('too-large'))
    expect(thrownBy(() => readPercent('0', 'x', true))).toMatchObject(refusal('too-small'))
    expect(readPercent('0', 'x').isZero()).toBe(true)
  })

  it('counts in whole numbers only', () => {
    expect(readCount(3, 'coats', 50)).toBe(3)
    expect(thrownBy(() => readCount(1.5, 'coats', 50))).toMatchObject(refusal('not-a-count', 'coats'))
    expect(thrownBy(() => readCount(Number.NaN, 'coats', 50))).toMatchObject(refusal('not-a-count', 'coats'))
    expect(thrownBy(() => readCount(0, 'coats', 50))).toMatchObject(refusal('count-out-of-range', 'coats'))
    expect(thrownBy(() => readCount(51, 'coats', 50))).toMatchObject(refusal('count-out-of-range', 'coats'))
  })
})

describe('printing', () => {
  it.each([
    [new D(1).div(3), '0.333333333333'],
    [new D('1e21'), '1000000000000000000000'],
    [new D('1e-9'), '0.000000001'],
    [new D('2.500'), '2.5'],
    [new D('-0'), '0'],
    [new D('0.0000000000005'), '0.000000000001'],
  ])('%s → %s', (value, text) => {
    expect(print(value)).toBe(text)
  })
})

describe('rounding to a division', () => {
  it.each([
    ['438.55', '0.1', '438.6'],
    ['438.549', '0.1', '438.5'],
    ['2.5', '1', '3'],
    ['0.3', '0.2', '0.4'],
    ['12.5', '5', '15'],
    ['12.4999', '5', '10'],
  ])('%s on %s → %s', (value, division, expected) => {
    expect(print(roundTo(new D(value), new D(division)))).toBe(expected)
  })

  it('is half up for what repeated division left just below a half', () => {
    const justBelow = new D('2.5').minus('1e-37')
    expect(justBelow.lt('2.5')).toBe(true)
    expect(print(roundTo(justBelow, new D(1)))).toBe('3')
  })

  it('goes down and up where told', () => {
    expect(print(floorTo(new D('12.39'), new D('0.1')))).toBe('12.3')
    expect(print(ceilTo(new D('12.31'), new D('0.1')))).toBe('12.4')
    expect(print(ceilTo(new D('12.3'), new D('0.1')))).toBe('12.3')
  })
})
