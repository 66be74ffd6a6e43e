import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { print } from '#shared/engine/decimal'
import { convertBasis, hasPotLife, readMix, shareOf } from '#shared/engine/mix'
import { parseRatio, printRatio } from '#shared/engine/ratio'
import { byWeight, decimal, refusal, thrownBy } from './builders'

describe('a ratio as text', () => {
  it.each([
    ['100:50:20', '100:50:20'],
    ['100 : 12,5', '100:12.5'],
    ['100/50/20', '100:50:20'],
    ['3+1', '3:1'],
    ['100 50 20', '100:50:20'],
    ['  4:1:1 ', '4:1:1'],
    ['100:25:20–30', '100:25:20–30'],
    ['100:25:20 - 30', '100:25:20–30'],
    ['10:300', '10:300'],
    ['100', '100'],
  ])('%j reads as %s', (text, printed) => {
    expect(printRatio(parseRatio(text))).toBe(printed)
  })

  it.each([
    ['', 'ratio-unreadable'], ['100:', 'ratio-unreadable'], ['100::20', 'ratio-unreadable'], ['a:b', 'ratio-unreadable'],
    ['100:-5', 'ratio-unreadable'], ['100:0', 'ratio-unreadable'], ['1.234,5:1', 'ratio-unreadable'], ['1e2:1', 'ratio-unreadable'],
    ['100:20–30–40', 'ratio-unreadable'], ['100:30–20', 'ratio-range'], ['1:1:1:1:1:1:1:1:1', 'ratio-too-many'],
  ])('%j is refused', (text, code) => {
    expect(thrownBy(() => parseRatio(text, 'ratio'))).toMatchObject(refusal(code, 'ratio'))
  })

  it('prints back what it read, whatever separator was used', () => {
    const separators = fc.constantFrom(':', '/', '+', ' ', ' : ')
    fc.assert(fc.property(fc.array(decimal(1, 900, 2), { minLength: 1, maxLength: 8 }), separators, (parts, separator) => {
      expect(printRatio(parseRatio(parts.join(separator)))).toBe(parts.join(':'))
    }))
  })
})

describe('a mix', () => {
  it('names roles by position where none are given: base, hardener, thinners', () => {
    const mix = readMix(byWeight(['100', '50', '20', '5']))
    expect(mix.components.map(({ role }) => role)).toEqual(['base', 'hardener', 'thinner', 'thinner'])
    expect(mix.components.map(({ reactive }) => reactive)).toEqual([false, true, false, false])
    expect(mix.components.map(({ tolerancePct }) => print(tolerancePct))).toEqual(['2', '3', '5', '5'])
  })

  it('has no pot life without a reactive component', () => {
    expect(hasPotLife(readMix(byWeight(['100', '40'], [{}, { role: 'thinner' }])))).toBe(false)
    expect(hasPotLife(readMix(byWeight(['100', '40'])))).toBe(true)
    expect(hasPotLife(readMix(byWeight(['100', '40'], [{}, { reactive: false }])))).toBe(false)
    expect(hasPotLife(readMix(byWeight(['100'], [{ reactive: true }])))).toBe(false)
  })

  it('shares by weight: 100:50:20', () => {
    const mix = readMix(byWeight(['100', '50', '20']))
    expect(mix.components.map(one => print(shareOf(mix, one).times(100)))).toEqual(['58.823529411765', '29.411764705882', '11.764705882353'])
  })

  it('by volume weighs each part with its density, and adds volumes up', () => {
    const mix = readMix({
      basis: 'volume',
      components: [
        { name: 'base', parts: '4', densityGPerMl: '1.25' },
        { name: 'hardener', parts: '1', densityGPerMl: '1.07' },
        { name: 'thinner', parts: '1', densityGPerMl: '0.87' },
      ],
    })
    expect(mix.components.map(({ weightParts }) => print(weightParts))).toEqual(['5', '1.07', '0.87'])
    expect(print(mix.densityGPerMl!)).toBe('1.156666666667')
    expect(convertBasis(mix, 'weight').map(print)).toEqual(['4', '0.856', '0.696'])
    expect(convertBasis(mix, 'volume').map(print)).toEqual(['4', '1', '1'])
  })

  it('lets the thinner be several times the base', () => {
    const mix = readMix(byWeight(['100', '600'], [{}, { role: 'thinner' }]))
    expect(print(shareOf(mix, mix.components[0]!).times(100))).toBe('14.285714285714')
  })

  it('takes the base where it stands, also when it is poured second', () => {
    expect(readMix(byWeight(['1', '9'], [{ role: 'accelerator' }, { role: 'base' }])).baseIndex).toBe(1)
  })

  it.each([
    ['no component', { basis: 'weight' as const, components: [] }, 'components-count', 'mix.components'],
    ['nine components', byWeight(Array.from({ length: 9 }, () => '1')), 'components-count', 'mix.components'],
    ['no base', byWeight(['1'], [{ role: 'thinner' }]), 'base-missing', 'mix.components'],
    ['no parts', byWeight(['100', '0']), 'too-small', 'mix.components.1.parts'],
    ['volume without density', { basis: 'volume' as const, components: [{ name: 'a', parts: '1', densityGPerMl: '1' }, { name: 'b', parts: '1' }] }, 'density-missing', 'mix.components.1.densityGPerMl'],
    ['peroxide without its sheet\'s tolerance', byWeight(['100', '2'], [{}, { role: 'peroxide' }]), 'tolerance-missing', 'mix.components.1.tolerancePct'],
    ['a range that falls', byWeight(['100', '30'], [{}, { partsMax: '20' }]), 'range-reversed', 'mix.components.1.partsMax'],
    ['a density of mercury and more', byWeight(['1'], [{ densityGPerMl: '31' }]), 'too-large', 'mix.components.0.densityGPerMl'],
  ])('refuses %s', (_, mix, code, field) => {
    expect(thrownBy(() => readMix(mix))).toMatchObject(refusal(code, field))
  })
})
