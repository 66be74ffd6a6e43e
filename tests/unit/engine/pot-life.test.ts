import { describe, expect, it } from 'vitest'
import { readMix } from '#shared/engine/mix'
import { calculatePotLife, leftoverRefusal, oldestEnd, potLifeCautions, potLifeStart, warmerC } from '#shared/engine/pot-life'
import { potState } from '#shared/engine/pot-state'
import { byWeight, refusal, thrownBy } from './builders'

describe('pot life from one value, 120 min at 20 °C', () => {
  const at = (temperatureC: string, more: object = {}) => calculatePotLife({ referenceMin: '120', referenceC: '20', temperatureC, ...more })

  it.each([
    ['20', '120', 'sheet'], ['30', '60', 'rule'], ['40', '30', 'rule'], ['10', '120', 'held'], ['25', '84.852813742386', 'rule'],
  ])('%s °C: %s min (%s)', (temperatureC, potLifeMin, basis) => {
    expect(at(temperatureC)).toMatchObject({ potLifeMin, basis })
  })

  it('is late from 75 % on, or from the mix\'s own share, and usable after standing', () => {
    expect(at('20')).toMatchObject({ lateAfterMin: '90', usableMin: '90' })
    expect(at('20', { lateFromPct: '50', inductionMin: '10' })).toMatchObject({ lateAfterMin: '60', usableMin: '50' })
    expect(at('40', { inductionMin: '30' }).usableMin).toBe('-7.5')
  })

  it('halves by another step where the sheet says so', () => {
    expect(at('28', { halvesPerC: '8' }).potLifeMin).toBe('60')
  })

  it('takes days', () => {
    expect(calculatePotLife({ referenceMin: '14400', referenceC: '20', temperatureC: '30' }).potLifeMin).toBe('7200')
  })
})

describe('pot life from a sheet\'s table', () => {
  const table = [{ c: '30', min: '60' }, { c: '15', min: '240' }, { c: '20', min: '160' }]
  it.each([
    ['15', '240', 'table'], ['20', '160', 'table'], ['25', '97.979589711327', 'table'], ['30', '60', 'table'],
    ['10', '240', 'held'], ['40', '30', 'rule'],
  ])('%s °C: %s min (%s)', (temperatureC, potLifeMin, basis) => {
    expect(calculatePotLife({ table, temperatureC })).toMatchObject({ potLifeMin, basis })
  })

  it('wins over a single value', () => {
    expect(calculatePotLife({ table, referenceMin: '500', referenceC: '20', temperatureC: '20' }).potLifeMin).toBe('160')
  })

  it.each([
    [[], 'table-empty'],
    [[{ c: '20', min: '60' }, { c: '20', min: '60' }], 'table-twice'],
    [[{ c: '20', min: '60' }, { c: '30', min: '61' }], 'table-rising'],
    [[{ c: '20', min: '0' }], 'too-small'],
  ])('%j is refused', (rows, code) => {
    expect(thrownBy(() => calculatePotLife({ table: rows, temperatureC: '20' }))).toMatchObject(refusal(code))
  })

  it('needs one of the two', () => {
    expect(thrownBy(() => calculatePotLife({ temperatureC: '20' }))).toMatchObject(refusal('pot-life-missing', 'referenceMin'))
  })
})

it('the warmer of material and air decides', () => {
  expect(warmerC('18', '24.5')).toBe('24.5')
  expect(warmerC('26', '24.5')).toBe('26')
  expect(warmerC(null, '24.5')).toBe('24.5')
  expect(warmerC(null, null)).toBeNull()
})

describe('the start', () => {
  const mix = readMix(byWeight(['100', '50', '20']))
  const pour = (index: number, at: number, grams = '10') => ({ index, at, grams })

  it('is the first stable gram of hardener on base', () => {
    expect(potLifeStart(mix, [pour(0, 100), pour(1, 200), pour(1, 250), pour(2, 300)])).toBe(200)
  })

  it('is the other component where the hardener came first', () => {
    expect(potLifeStart(mix, [pour(1, 100), pour(2, 150), pour(0, 200)])).toBe(150)
  })

  it('goes by time, not by the order of the list', () => {
    expect(potLifeStart(mix, [pour(1, 200), pour(0, 100)])).toBe(200)
  })

  it('is not while one is alone, weighs nothing, or nothing reacts', () => {
    expect(potLifeStart(mix, [pour(1, 100), pour(1, 200)])).toBeNull()
    expect(potLifeStart(mix, [pour(0, 100), pour(1, 200, '0')])).toBeNull()
    expect(potLifeStart(mix, [pour(0, 100), pour(2, 200)])).toBeNull()
    expect(potLifeStart(readMix(byWeight(['100', '40'], [{}, { role: 'thinner' }])), [pour(0, 1), pour(1, 2)])).toBeNull()
  })
})

describe('leftovers', () => {
  const leftover = { sameMixRevision: true, leftoverG: '50', freshG: '1000', maxSharePct: '10', leftoverEndsAt: 2000, now: 1000 }

  it('never restart a pot: the mixture ends with its oldest part', () => {
    expect(oldestEnd([5000, 2000, 9000])).toBe(2000)
  })

  it.each([
    [{}, null],
    [{ leftoverG: '100' }, null],
    [{ leftoverG: '100.1' }, 'over-share'],
    [{ sameMixRevision: false }, 'other-mix'],
    [{ now: 2000 }, 'life-up'],
    [{ maxSharePct: null }, 'sheet-says-no'],
  ])('%j → %s', (more, refused) => {
    expect(leftoverRefusal({ ...leftover, ...more })).toBe(refused)
  })
})

it('big pots and damp air are cautions, not numbers', () => {
  expect(potLifeCautions({ totalG: '1000', rhPct: '50' })).toEqual([])
  expect(potLifeCautions({ totalG: '5000', rhPct: '75' })).toEqual(['big-pot', 'damp-air'])
  expect(potLifeCautions({ totalG: '5000', rhPct: null })).toEqual(['big-pot'])
})

describe('a pot', () => {
  const times = { startsAt: 0, lateAt: 75, endsAt: 100 }
  it.each([[0, 'fresh'], [74, 'fresh'], [75, 'closing'], [99, 'closing'], [100, 'life-up'], [1000, 'life-up']])('at %d is %s', (now, state) => {
    expect(potState({ ...times, now })).toBe(state)
  })

  it('cannot end before it is late', () => {
    expect(thrownBy(() => potState({ startsAt: 0, lateAt: 101, endsAt: 100, now: 0 }))).toMatchObject(refusal('times-reversed'))
  })
})
