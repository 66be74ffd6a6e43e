import { describe, expect, it } from 'vitest'
import { readDecimal } from '~/utils/decimal-field'

describe('readDecimal', () => {
  it.each([
    ['21.6', '21.6'], ['21,6', '21.6'], ['1490', '1490'], ['1 490,5', '1490.5'], ['1\u2009490.0', '1490.0'], [' 007 ', '7'],
    [',5', '0.5'], ['5,', '5'], ['-2,5', '-2.5'], ['\u22122.5', '-2.5'], ['1.234', '1.234'], ['0', '0'],
  ])('takes %j as %s', (text, value) => {
    expect(readDecimal(text)).toEqual({ kind: 'value', value })
  })

  it.each(['', '   '])('takes %j as nothing typed', (text) => {
    expect(readDecimal(text)).toEqual({ kind: 'empty' })
  })

  it.each([
    ['1.234,5', '1234.5'], ['1,234.5', '1234.5'], ['1.234.567', '1234567'], ['12,345,678.9', '12345678.9'],
  ])('asks about %j instead of guessing', (text, value) => {
    expect(readDecimal(text)).toEqual({ kind: 'question', value })
  })

  it.each(['abc', '1.2.3', '1.234.5', '1,2,3', '1.234,567.8', '12a', '.', '-', '1e5', '--1'])('cannot read %j', (text) => {
    expect(readDecimal(text)).toEqual({ kind: 'unreadable' })
  })
})
