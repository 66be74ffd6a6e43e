import { describe, expect, it } from 'vitest'
import { reckon, withFittingCup } from '#shared/utils/bench-reckon'
import { id, setup, snapshot } from './shop'

describe('reckon', () => {
  it('turns area, coat weight, efficiency and residue into one pot of grams', () => {
    const { pots, faults, totalG } = reckon(setup(), snapshot())
    expect(faults).toEqual([])
    // 7.2 × 120 ÷ 60 % + 150 = 1590, at 100 : 50 : 20.
    expect(pots[0]?.batch.components.map(({ targetG }) => targetG)).toEqual(['935.3', '467.6', '187.1'])
    expect(totalG).toBe('1590')
  })

  it('divides by the cup, each pot with its own residue', () => {
    const { pots, boundBy } = reckon(setup({ areaM2: '21.6', paceM2PerH: '60' }), snapshot())
    expect(boundBy).toBe('cup')
    expect(pots).toHaveLength(3)
    expect(pots.map(({ batch }) => batch.exactTotalG)).toEqual(['1590', '1590', '1590'])
  })

  it('divides by pot life at the pace that is known', () => {
    // 3 h of 4 h may be sprayed: at 1 m²/h that is 3 m² a pot.
    expect(reckon(setup({ paceM2PerH: '1' }), snapshot())).toMatchObject({ boundBy: 'pot-life', pots: { length: 3 } })
  })

  it('says that it divided by the cup only while no pace is known', () => {
    expect(reckon(setup({ paceM2PerH: '' }), snapshot()).cautions).toEqual(['pace-unknown'])
  })

  it.each([
    ['areaM2', { areaM2: '' }, 'missing'],
    ['areaM2', { areaM2: '1.234,5' }, 'refused'],
    ['areaM2', { areaM2: '0' }, 'refused'],
    ['purpose', { purpose: ' ' }, 'missing'],
    ['filmWeightGsm', { filmWeightGsm: '-3' }, 'refused'],
    ['filmWeightIs', { filmWeightIs: null }, 'missing'],
    ['residueG', { residueG: 'x' }, 'refused'],
    ['tinG', { way: 'tin', tinG: '0.01' }, 'refused'],
    ['totalG', { way: 'total', totalG: '100' }, undefined],
  ] as const)('puts a fault beside %s', (field, change, kind) => {
    const { faults } = reckon(setup(change), snapshot())
    if (kind === undefined) expect(faults.map(fault => fault.field)).toEqual(['residueG'])
    else expect(faults).toContainEqual(expect.objectContaining({ field, kind }))
  })

  it('names every number that cannot be read at once, while others are still missing', () => {
    const started = { purpose: '', gunId: '', mixId: '' }
    const refused = (change: Parameters<typeof setup>[0]) => reckon(setup({ ...started, ...change }), snapshot()).faults.filter(({ kind }) => kind === 'refused')
    const message = 'Give a plain number with a point'
    expect(refused({ areaM2: 'abc', filmWeightGsm: '' })).toEqual([{ field: 'areaM2', message, kind: 'refused' }])
    expect(refused({ areaM2: 'abc', filmWeightGsm: 'x', residueG: '-1' })).toEqual([
      { field: 'areaM2', message, kind: 'refused' }, { field: 'filmWeightGsm', message, kind: 'refused' }, { field: 'residueG', message: 'Must be at least 0', kind: 'refused' },
    ])
    expect(refused({ way: 'tin', areaM2: 'abc', tinG: '1 kg' })).toEqual([{ field: 'tinG', message, kind: 'refused' }])
    expect(refused({ way: 'total', areaM2: 'abc', totalG: '500' })).toEqual([])
  })

  it('names a number once when nothing else is missing', () => {
    expect(reckon(setup({ areaM2: 'abc' }), snapshot())).toMatchObject({ faults: [{ field: 'areaM2', kind: 'refused' }], whole: null, pots: [] })
  })

  it('reckons what is left in the tin, down to the scale', () => {
    const { pots } = reckon(setup({ way: 'tin', tinG: '500.07', filmWeightGsm: '' }), snapshot())
    expect(pots[0]?.batch.components[0]?.targetG).toBe('500')
    expect(pots[0]?.plan.available).toEqual({ index: 0, grams: '500.07' })
  })

  it('takes the smallest cup that holds everything', () => {
    expect(withFittingCup(setup({ areaM2: '2' }), snapshot()).cupId).toBe(id(46))
    expect(withFittingCup(setup(), snapshot()).cupId).toBe(id(45))
    expect(withFittingCup(setup({ areaM2: '200' }), snapshot()).cupId).toBe(id(45))
    expect(withFittingCup(setup({ areaM2: '2', cupChosen: true }), snapshot()).cupId).toBe(id(45))
  })
})
