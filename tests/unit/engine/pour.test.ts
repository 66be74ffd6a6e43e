import { describe, expect, it } from 'vitest'
import { calculatePour } from '#shared/engine/pour'
import type { PourInput } from '#shared/engine/pour'
import { byWeight, refusal, thrownBy } from './builders'

const mix = byWeight(['100', '50', '20'], [{ name: 'base' }, { name: 'hardener' }, { name: 'thinner' }])
const pour = (poured: (string | null)[], more: Partial<PourInput> = {}) => calculatePour({
  mix, scaleDivisionG: '0.1', targetTotalG: '1490', ...more,
  poured: poured.flatMap((pouredG, index) => (pouredG === null ? [] : [{ index, pouredG }])),
})
const verdicts = (answer: ReturnType<typeof pour>) => answer.components.map(({ verdict }) => verdict)

describe('targets while pouring 1 490 g at 100:50:20', () => {
  it('stand as planned while nothing is in', () => {
    const answer = pour([])
    expect(answer.components.map(({ targetG }) => targetG)).toEqual(['876.5', '438.2', '175.3'])
    expect(answer).toMatchObject({ correctionNeeded: false, newTotalG: '1490', extraG: '0', fits: true, complete: false })
    expect(verdicts(answer)).toEqual([null, null, null])
  })

  it('follow the base: 877.1 g of base ask for 438.6 g of hardener, 425.4 to 451.8, and 175.4 g of thinner', () => {
    const answer = pour(['877.1'])
    expect(answer.components.map(({ targetG }) => targetG)).toEqual(['876.5', '438.6', '175.4'])
    expect(answer.components[1]).toMatchObject({ lowG: '425.442', highG: '451.758' })
    expect(answer.components[0]).toMatchObject({ verdict: 'in-tolerance', deviationPct: '0.068454078722' })
    expect(answer.newTotalG).toBe('1491.1')
  })

  it('1 003.0 g of base at 100:25:25 ask for 250.8 and 250.8', () => {
    const answer = pour(['1003.0'], { mix: byWeight(['100', '25', '25']), targetTotalG: '1500' })
    expect(answer.components.slice(1).map(({ targetG }) => targetG)).toEqual(['250.8', '250.8'])
  })

  it('too much base is no correction: the others follow and the batch grows', () => {
    const answer = pour(['512'], { targetTotalG: '850' })
    expect(verdicts(answer)).toEqual(['too-much', null, null])
    expect(answer).toMatchObject({ correctionNeeded: false, newTotalG: '870.4', extraG: '20.4' })
    expect(answer.components.map(({ addG }) => addG)).toEqual(['0', '256', '102.4'])
  })

  it('while the base is not in, judge against the plan', () => {
    const answer = pour([null, '438.2'])
    expect(answer.components[1]).toMatchObject({ targetG: '438.2', verdict: 'in-tolerance', deviationPct: null })
  })
})

describe('460.5 g of hardener on 877.1 g of base', () => {
  const answer = pour(['877.1', '460.5'])

  it('is 5 % too much', () => {
    expect(answer.components[1]).toMatchObject({ verdict: 'too-much', deviationPct: '5.005130543838' })
  })

  it('corrects to base 921.0, add 43.9, thinner 184.2, total 1 565.7', () => {
    expect(answer).toMatchObject({ correctionNeeded: true, cause: 'reactive-too-much', newTotalG: '1565.7', extraG: '75.7', keep: null, tooCoarseForScale: false })
    expect(answer.components.map(({ newTargetG, addG }) => [newTargetG, addG])).toEqual([['921', '43.9'], ['460.5', '0'], ['184.2', '184.2']])
  })

  it('says when it no longer fits the cup', () => {
    expect(pour(['877.1', '460.5'], { cupCapacityG: '1565.7' }).fits).toBe(true)
    expect(pour(['877.1', '460.5'], { cupCapacityG: '1565.6' }).fits).toBe(false)
  })

  it('or the scale', () => {
    const input = { mix, scaleDivisionG: '0.1', targetTotalG: '1490', poured: [{ index: 0, pouredG: '877.1' }, { index: 1, pouredG: '460.5' }] }
    expect(calculatePour(input, { scale: { capacityG: '1500' } }).fits).toBe(false)
    expect(calculatePour(input, { scale: { capacityG: '1600' } }).fits).toBe(true)
  })

  it('followed, is in tolerance', () => {
    const after = pour(['921', '460.5', '184.2'], { targetTotalG: '1565.7' })
    expect(verdicts(after)).toEqual(['in-tolerance', 'in-tolerance', 'in-tolerance'])
    expect(after).toMatchObject({ correctionNeeded: false, complete: true })
  })
})

describe('too much thinner', () => {
  const thinned = (sheetMaxParts?: string) => pour(['877.1', '438.6', '219.3'], {
    mix: byWeight(['100', '50', '20'], [{}, {}, sheetMaxParts === undefined ? {} : { sheetMaxParts }]),
  })

  it('is first offered to be kept, with the parts as they now are', () => {
    expect(thinned()).toMatchObject({ correctionNeeded: true, cause: 'thinner-too-much', keep: { index: 2, partsAsPoured: '25.002850302132', withinSheet: null } })
    expect(thinned('30').keep?.withinSheet).toBe(true)
    expect(thinned('25').keep?.withinSheet).toBe(false)
  })

  it('else the whole batch grows to it', () => {
    expect(thinned().components.map(({ newTargetG }) => newTargetG)).toEqual(['1096.5', '548.3', '219.3'])
  })

  it('once kept asks for nothing, and nothing grows to meet it', () => {
    const kept = pour(['877.1', '438.6', '219.3'], { kept: [2] })
    expect(kept).toMatchObject({ correctionNeeded: false, newTotalG: '1535', complete: true })
    const hardenerToo = pour(['877.1', '460.5', '260'], { kept: [2] })
    expect(hardenerToo.components.map(({ newTargetG }) => newTargetG)).toEqual(['921', '460.5', '184.2'])
    expect(hardenerToo.components.map(({ addG }) => addG)).toEqual(['43.9', '0', '0'])
  })

  it('inside a range of parts is in tolerance', () => {
    const ranged = byWeight(['100', '25', '20'], [{}, {}, { partsMax: '30' }])
    const at = (thinner: string) => verdicts(pour(['1000', '250', thinner], { mix: ranged, targetTotalG: '1450' }))[2]
    expect(['188', '200', '299', '302'].map(at)).toEqual(['short', 'in-tolerance', 'in-tolerance', 'too-much'])
  })
})

describe('after the last pour', () => {
  it('a short hardener is topped up alone', () => {
    const answer = pour(['877.1', '400', '175.4'])
    expect(answer).toMatchObject({ correctionNeeded: true, cause: 'short-at-end', newTotalG: '1491.1' })
    expect(answer.components.map(({ addG }) => addG)).toEqual(['0', '38.6', '0'])
  })

  it('before it, short is only: keep pouring', () => {
    const answer = pour(['877.1', '400'])
    expect(verdicts(answer)).toEqual(['in-tolerance', 'short', null])
    expect(answer.correctionNeeded).toBe(false)
    expect(answer.components[1]?.addG).toBe('38.6')
  })

  it('a base that is short makes a smaller batch, not a wrong one', () => {
    const answer = pour(['800', '400', '160'])
    expect(verdicts(answer)).toEqual(['short', 'in-tolerance', 'in-tolerance'])
    expect(answer.correctionNeeded).toBe(false)
  })
})

describe('a coarse scale', () => {
  it('cannot tell near the end of a band, and offers to pour to the target', () => {
    const answer = pour(['100', '52'], { scaleDivisionG: '1', scaleMpeG: '0.5', targetTotalG: '170' })
    expect(answer.components[1]).toMatchObject({ targetG: '50', verdict: 'cannot-tell', uncertaintyG: '1' })
    expect(answer.correctionNeeded).toBe(false)
    const below = pour(['100', '48.5'], { scaleDivisionG: '1', scaleMpeG: '0.5', targetTotalG: '170' })
    expect(below.components[1]).toMatchObject({ verdict: 'cannot-tell', addG: '1.5' })
  })

  it('says when even a correction followed to the gram could not be judged', () => {
    const answer = pour(['10', '9'], { scaleDivisionG: '1', targetTotalG: '17' })
    expect(answer).toMatchObject({ correctionNeeded: true, tooCoarseForScale: true })
    expect(answer.components[2]?.tooSmallForScale).toBe(true)
  })
})

it.each<[string, PourInput['poured'], string, string]>([
  ['an index the mix has not', [{ index: 3, pouredG: '1' }], 'component-unknown', 'poured.0.index'],
  ['one component twice', [{ index: 0, pouredG: '1' }, { index: 0, pouredG: '1' }], 'poured-twice', 'poured.1.index'],
  ['negative grams', [{ index: 0, pouredG: '-1' }], 'too-small', 'poured.0.pouredG'],
])('refuses %s', (_, poured, code, field) => {
  expect(thrownBy(() => calculatePour({ mix, scaleDivisionG: '0.1', targetTotalG: '100', poured }))).toMatchObject(refusal(code, field))
})
