import { describe, expect, it } from 'vitest'
import { materialFaults } from '#shared/utils/material-rules'

describe('materialFaults', () => {
  it('is content with figures that agree, and with none', () => {
    expect(materialFaults({})).toEqual([])
    expect(materialFaults({ solidsPct: '40', waterPct: '30', exemptPct: '0', vocPct: '30', vocGPerL: null, containsIsocyanates: true, hazardCodes: ['EUH204'] })).toEqual([])
  })

  it.each([
    ['solvent given twice', { vocGPerL: '450', vocPct: '40' }, 'vocPct'],
    ['shares above a hundred by the smallest step', { solidsPct: '60', waterPct: '39.9999', exemptPct: '0.0002' }, 'solidsPct'],
    ['a statement on isocyanates without the tick', { hazardCodes: ['H317', 'EUH204'], containsIsocyanates: false }, 'containsIsocyanates'],
  ])('names %s', (_, facts, path) => {
    expect(materialFaults(facts).map(fault => fault.path)).toEqual([path])
  })

  it('says nothing of what a change leaves out', () => {
    expect(materialFaults({ hazardCodes: ['EUH204'] })).toEqual([])
  })
})
