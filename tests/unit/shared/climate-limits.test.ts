import { describe, expect, it } from 'vitest'
import { climateWord } from '#shared/utils/climate-limits'

describe('the air of a booth', () => {
  it.each([
    ['temperature', '14.9', 'cold'], ['temperature', '15', null], ['temperature', '30', null], ['temperature', '30.01', 'warm'],
    ['humidity', '29', 'dry'], ['humidity', '30', null], ['humidity', '65', null], ['humidity', '65.5', 'damp'],
  ] as const)('of %s %s is %s', (what, value, word) => {
    expect(climateWord(what, value)).toBe(word)
  })
})
