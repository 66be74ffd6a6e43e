import { describe, expect, it } from 'vitest'
import { viscosityWords } from '../../../utils/viscosity'

describe('the reading of a cup in words', () => {
  it.each([
    [null, null],
    [{ cup: 'din-4', seconds: '25', materialC: '21' }, 'DIN 4 mm cup, 25 s at 21 °C'],
    [{ cup: 'din-4', seconds: '25', materialC: null }, 'DIN 4 mm cup, 25 s'],
    [{ cup: null, seconds: null, materialC: '23.5' }, 'material at 23.5 °C'],
    [{ cup: null, seconds: '25', materialC: '21' }, '25 s at 21 °C'],
  ])('%j is %s', (reading, words) => {
    expect(viscosityWords(reading)).toBe(words)
  })
})
