import { describe, expect, it } from 'vitest'
import { coveredAreaM2 } from '#shared/engine/amount'
import type { BatchInput } from '#shared/engine/batch'
import { calculateBatch, planBatch } from '#shared/engine/batch'
import { byWeight, refusal, thrownBy } from './builders'

const kitchen: BatchInput = {
  mix: {
    basis: 'weight',
    components: [{ name: 'base', parts: '100', densityGPerMl: '1.25' }, { name: 'hardener', parts: '25' }],
  },
  areaM2: '21.6', filmWeightGsm: '120', filmWeightIs: 'deposited', coats: 1, transferEfficiencyPct: '60',
  reserveG: '60', reservePct: '0', scaleDivisionG: '0.1',
}

describe('21.6 m² at 120 g/m², 60 %, 100:25, 60 g residue', () => {
  const batch = calculateBatch(kitchen)

  it('puts 2 592 g on the panel, 4 320 g through the gun, 4 380 g in the pot', () => {
    expect(batch).toMatchObject({ depositedG: '2592', sprayedG: '4320', exactTotalG: '4380', targetTotalG: '4380', tooSmallForScale: false })
  })

  it('asks for 3 504 g of base and 876 g of hardener', () => {
    expect(batch.components).toEqual([
      { name: 'base', parts: '100', sharePct: '80', exactG: '3504', targetG: '3504', runningTotalG: '3504', ratioErrorPct: '0', volumeMl: '2803.2' },
      { name: 'hardener', parts: '25', sharePct: '20', exactG: '876', targetG: '876', runningTotalG: '4380', ratioErrorPct: '0', volumeMl: null },
    ])
  })

  it('has exactly the fields of the answer', () => {
    expect(Object.keys(batch).sort()).toEqual(['components', 'depositedG', 'exactTotalG', 'smallestTotalG', 'sprayedG', 'targetTotalG', 'tooSmallForScale', 'working'])
  })

  it('shows the sum of every figure', () => {
    expect(batch.working.slice(0, 3)).toEqual([
      { what: 'on the panel', formula: '21.6 m² × 120 g/m² × 1', value: '2592', unit: 'g' },
      { what: 'out of the gun', formula: '2592 g ÷ 60 %', value: '4320', unit: 'g' },
      { what: 'to mix', formula: '4320 g × (1 + 0 %) + 60 g', value: '4380', unit: 'g' },
    ])
    expect(batch.working.at(-1)).toEqual({ what: 'total of the targets', formula: '3504 + 876', value: '4380', unit: 'g' })
  })

  it('needs two thirds more than where the sheet means the weight out of the gun', () => {
    const outOfTheGun = calculateBatch({ ...kitchen, filmWeightIs: 'sprayed', reserveG: '0' })
    expect(outOfTheGun).toMatchObject({ depositedG: '2592', sprayedG: '2592', exactTotalG: '2592' })
  })
})

describe('an amount', () => {
  it('adds the per cent before the residue: the residue belongs to the pot', () => {
    expect(calculateBatch({ ...kitchen, reservePct: '10' }).exactTotalG).toBe('4812')
  })

  it('multiplies with the coats', () => {
    expect(calculateBatch({ ...kitchen, coats: 2 })).toMatchObject({ depositedG: '5184', exactTotalG: '8700' })
  })

  it('starts from total grams, and covers what the residue leaves', () => {
    const { areaM2: _, ...film } = kitchen
    expect(planBatch({ ...film, totalG: '4380' })).toMatchObject({ exactTotalG: '4380', sprayedG: '4320', depositedG: '2592', areaM2: '21.6' })
    expect(coveredAreaM2({ ...film, totalG: '4380' })).toBe('21.6')
  })

  it('starts from total grams without a coat weight', () => {
    const plan = planBatch({ mix: byWeight(['100', '50', '20']), totalG: '850', scaleDivisionG: '1' })
    expect(plan).toMatchObject({ depositedG: null, areaM2: null, sprayedG: '850', densityGPerMl: null })
    expect(plan.components.map(({ targetG }) => targetG)).toEqual(['500', '250', '100'])
  })

  it('starts from what is left of a component', () => {
    const { areaM2: _, ...film } = kitchen
    const plan = planBatch({ ...film, available: { index: 1, grams: '500' } })
    expect(plan.components.map(({ targetG }) => targetG)).toEqual(['2000', '500'])
    expect(plan).toMatchObject({ exactTotalG: '2500', sprayedG: '2440', areaM2: '12.2' })
  })

  it('never asks for more than is left, and says that it rounded down', () => {
    const batch = calculateBatch({ mix: byWeight(['100', '50']), available: { index: 0, grams: '100.06' }, scaleDivisionG: '0.1' })
    expect(batch.components[0]?.targetG).toBe('100')
    expect(batch.working[0]).toEqual({ what: 'c0, down to the scale\'s division', formula: '100.06 g', value: '100', unit: 'g' })
  })

  const { areaM2: _, ...withoutArea } = kitchen
  it.each<[string, Partial<BatchInput>, string, string]>([
    ['no way in', withoutArea, 'amount-ways', 'areaM2'],
    ['two ways in', { ...kitchen, totalG: '5' }, 'amount-ways', 'areaM2'],
    ['an area without coat weight', { ...kitchen, filmWeightGsm: undefined }, 'film-weight-missing', 'filmWeightGsm'],
    ['a coat weight that means nothing', { ...kitchen, filmWeightIs: undefined }, 'film-weight-meaning-missing', 'filmWeightIs'],
    ['no efficiency', { ...kitchen, transferEfficiencyPct: undefined }, 'efficiency-missing', 'transferEfficiencyPct'],
    ['efficiency 0', { ...kitchen, transferEfficiencyPct: '0' }, 'too-small', 'transferEfficiencyPct'],
    ['efficiency over 100', { ...kitchen, transferEfficiencyPct: '101' }, 'too-large', 'transferEfficiencyPct'],
    ['area 0', { ...kitchen, areaM2: '0' }, 'too-small', 'areaM2'],
    ['negative residue', { ...kitchen, reserveG: '-1' }, 'too-small', 'reserveG'],
    ['half a coat', { ...kitchen, coats: 0.5 }, 'not-a-count', 'coats'],
    ['division 0', { ...kitchen, scaleDivisionG: '0' }, 'too-small', 'scaleDivisionG'],
    ['a pot that is all residue', { ...withoutArea, totalG: '60' }, 'residue-exceeds-total', 'reserveG'],
    ['a component that is not there', { ...withoutArea, available: { index: 2, grams: '5' } }, 'component-unknown', 'available.index'],
    ['less left than the scale shows', { ...withoutArea, available: { index: 0, grams: '0.05' } }, 'too-little', 'available.grams'],
    ['more than any shop mixes', { ...kitchen, areaM2: '1000000', filmWeightGsm: '100000', coats: 50 }, 'too-large', 'areaM2'],
  ])('refuses %s', (_, input, code, field) => {
    expect(thrownBy(() => calculateBatch(input as BatchInput))).toMatchObject(refusal(code, field))
  })
})

describe('the scale', () => {
  it('says when an amount is too small for it, and from where on it is not', () => {
    // 20 parts of 170 on 1 g: u = 0.5 g, tolerance 5 %: at least 10 g of thinner; 9.5 × 170 ÷ 20 = 80.75
    const mix = byWeight(['100', '50', '20'])
    const at = (totalG: string) => calculateBatch({ mix, totalG, scaleDivisionG: '1' })
    expect(at('60')).toMatchObject({ tooSmallForScale: true, smallestTotalG: '81' })
    expect(at('81').tooSmallForScale).toBe(false)
    expect(at('80').tooSmallForScale).toBe(true)
  })

  it('counts the permissible error of its record', () => {
    const mix = byWeight(['100', '50', '20'])
    const sure = calculateBatch({ mix, totalG: '850', scaleDivisionG: '1' })
    const checked = calculateBatch({ mix, totalG: '850', scaleDivisionG: '1', scaleMpeG: '1' })
    expect(sure.smallestTotalG).toBe('81')
    expect(checked.smallestTotalG).toBe('251')
  })

  it('warns where the uncertainty is more than a third of the tolerance', () => {
    const plan = planBatch({ mix: byWeight(['100', '50', '20']), totalG: '170', scaleDivisionG: '1' })
    expect(plan.components.map(({ fitness, targetG, uncertaintyG }) => [targetG, uncertaintyG, fitness])).toEqual([
      ['100', '0.5', 'fine'], ['50', '0.5', 'fine'], ['20', '0.5', 'coarse'],
    ])
  })

  it('doubles the uncertainty of a component read off the running total', () => {
    const input = { mix: byWeight(['100', '50', '20']), totalG: '170', scaleDivisionG: '1' }
    expect(planBatch(input, { weighing: 'running' }).components.map(({ uncertaintyG }) => uncertaintyG)).toEqual(['1', '1', '1'])
  })

  it('with an OIML class looks its error up at the load, and knows no smallest total above its range', () => {
    const input = { mix: byWeight(['100', '50', '20']), totalG: '850', scaleDivisionG: '1' }
    const scale = { oimlClass: 'III' as const, verificationIntervalG: '1' }
    // in service 2 × 0.5 e up to 500 e: u = 0.5 + 1
    expect(planBatch(input, { scale }).components.map(({ uncertaintyG }) => uncertaintyG)).toEqual(['1.5', '1.5', '1.5'])
    const rare = { mix: byWeight(['1000', '1']), totalG: '1000', scaleDivisionG: '1' }
    expect(planBatch(rare, { scale }).smallestTotalG).toBeNull()
  })
})
