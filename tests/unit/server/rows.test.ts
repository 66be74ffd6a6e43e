import { describe, expect, it } from 'vitest'
import { decimalOf, decimalOrNull, isoOrNull } from '../../../server/utils/rows'

describe('a DECIMAL column', () => {
  it.each([
    ['1490.0000', '1490'],
    ['0.1000', '0.1'],
    ['-12.5000', '-12.5'],
    ['0.0000', '0'],
    ['100', '100'],
    ['1000', '1000'],
    ['0.0001', '0.0001'],
  ])('%s is %s', (column, plain) => {
    expect(decimalOf(column)).toBe(plain)
  })

  it('may be empty', () => {
    expect(decimalOrNull(null)).toBeNull()
    expect(isoOrNull(null)).toBeNull()
  })
})
