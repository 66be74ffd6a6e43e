import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { D, sum } from '#shared/engine/decimal'
import { calculatePots } from '#shared/engine/pots'
import type { PotsInput } from '#shared/engine/pots'
import { measuredPaceM2PerH, workMinutes } from '#shared/engine/pots-life'
import { divideOnBorders } from '#shared/engine/pots-split'
import { byWeight, decimal, refusal, thrownBy } from './builders'

const door: PotsInput = {
  mix: byWeight(['100', '50', '20']),
  sprayG: '4320', residueG: '60', areaM2: '21.6', cupCapacityG: '2000', scaleDivisionG: '0.1',
  paceM2PerH: '12', potLifeMin: '120', inductionMin: '5', mixToSprayMin: '3',
}
const tenPieces = Array.from({ length: 10 }, () => '2.16')

describe('21.6 m², 4 320 g to spray, 60 g residue a pot', () => {
  it('needs three equal pots in 2 000 g cups: the cup decides', () => {
    const { pots, boundBy } = calculatePots(door)
    expect(boundBy).toBe('cup')
    expect(pots.map(({ totalG, areaM2, startsAfterMin }) => [totalG, areaM2, startsAfterMin])).toEqual([
      ['1500.1', '7.2', '0'], ['1500.1', '7.2', '36'], ['1500.1', '7.2', '72'],
    ])
    expect(pots[0]?.exactTotalG).toBe('1500')
    expect(pots[0]?.components.map(({ targetG }) => targetG)).toEqual(['882.4', '441.2', '176.5'])
  })

  it('needs two in 5 000 g cups: 90 min late limit less 8 min leave 82 min of spraying, the whole takes 108', () => {
    const { pots, boundBy } = calculatePots({ ...door, cupCapacityG: '5000' })
    expect(boundBy).toBe('pot-life')
    expect(pots.map(({ totalG, startsAfterMin }) => [totalG, startsAfterMin])).toEqual([['2220', '0'], ['2220', '54']])
  })

  it('counts the way from mixing to the first spray: 109 min would do for 108, 106 do not', () => {
    const tight = { ...door, cupCapacityG: '5000', potLifeMin: '152' }
    expect(calculatePots({ ...tight, mixToSprayMin: '0' }).pots).toHaveLength(1)
    expect(calculatePots(tight).pots).toHaveLength(2)
  })

  it('needs one where everything fits', () => {
    const { pots, boundBy } = calculatePots({ ...door, cupCapacityG: '5000', potLifeMin: '240' })
    expect(boundBy).toBe('one-pot')
    expect(pots.map(({ totalG }) => totalG)).toEqual(['4380'])
  })

  it('is bound by the scale where it carries least', () => {
    expect(calculatePots({ ...door, scaleCapacityG: '1200' })).toMatchObject({ boundBy: 'scale', pots: { length: 4 } })
  })

  it('ends pots on piece borders, as even as they allow', () => {
    const { pots } = calculatePots({ ...door, pieceAreasM2: tenPieces })
    expect(pots.map(({ fromPiece, toPiece, areaM2 }) => [fromPiece, toPiece, areaM2])).toEqual([[0, 3, '8.64'], [4, 7, '8.64'], [8, 9, '4.32']])
    const two = calculatePots({ ...door, cupCapacityG: '3900', potLifeMin: '240', pieceAreasM2: tenPieces }).pots
    expect(two.map(({ fromPiece, toPiece }) => [fromPiece, toPiece])).toEqual([[0, 4], [5, 9]])
  })

  it('mixes a pot when it is needed: while the one before is sprayed empty', () => {
    const { pots } = calculatePots({ ...door, pieceAreasM2: tenPieces })
    expect(pots.map(({ startsAfterMin }) => startsAfterMin)).toEqual(['0', '43.2', '86.4'])
  })

  it('without a pace cannot bound by pot life, and says so', () => {
    const { paceM2PerH: _, ...unknown } = door
    expect(calculatePots({ ...unknown, cupCapacityG: '5000' })).toMatchObject({ cautions: ['pace-unknown'], boundBy: 'one-pot', pots: [{ startsAfterMin: '0' }] })
    // 4 320 g at 30 g/min take 144 min at least; 82 are usable
    expect(calculatePots({ ...unknown, cupCapacityG: '5000', gunFlowGPerMin: '30' })).toMatchObject({ cautions: ['flow-only'], boundBy: 'pot-life', pots: { length: 2 } })
  })

  it('without a reactive component has no pot life', () => {
    const { potLifeMin: _, ...stain } = door
    const mix = byWeight(['100', '600'], [{}, { role: 'thinner' }])
    expect(calculatePots({ ...stain, mix, cupCapacityG: '5000' })).toMatchObject({ boundBy: 'one-pot', cautions: [] })
    expect(thrownBy(() => calculatePots(stain))).toMatchObject(refusal('pot-life-missing', 'potLifeMin'))
  })
})

describe('coats', () => {
  const twoCoats = { ...door, cupCapacityG: '5000', coats: 2 }

  it('further apart than the pot lives are mixed per coat', () => {
    const { pots } = calculatePots({ ...twoCoats, coatIntervalMin: '180' })
    expect(pots.map(({ coat, totalG, startsAfterMin }) => [coat, totalG, startsAfterMin])).toEqual([
      [1, '1140', '0'], [1, '1140', '54'], [2, '1140', '180'], [2, '1140', '234'],
    ])
  })

  it('wet on wet share a pot that lives through both', () => {
    const { pots } = calculatePots({ ...twoCoats, coatIntervalMin: '5', paceM2PerH: '40' })
    // 21.6 m² take 32.4 min a coat, 64.8 in all; 82 are usable
    expect(pots.map(({ coat, totalG }) => [coat, totalG])).toEqual([[undefined, '4380']])
  })
})

it.each<[string, Partial<PotsInput>, string, string]>([
  ['a pot late before it is sprayed', { inductionMin: '90' }, 'no-usable-life', 'potLifeMin'],
  ['a cup that the residue fills', { cupCapacityG: '60' }, 'pot-too-small', 'cupCapacityG'],
  ['a piece too large for a pot', { pieceAreasM2: ['1.6', '20'] }, 'piece-too-large', 'pieceAreasM2.1'],
  ['pieces that do not add up', { pieceAreasM2: ['10', '10'] }, 'areas-differ', 'pieceAreasM2'],
  ['nothing to spray', { sprayG: '0' }, 'too-small', 'sprayG'],
])('refuses %s', (_, more, code, field) => {
  expect(thrownBy(() => calculatePots({ ...door, ...more }))).toMatchObject(refusal(code, field))
})

describe('a split on borders', () => {
  const cuts = (count: number): number[][] => (count === 0
    ? [[]]
    : cuts(count - 1).flatMap(rest => [rest, [...rest, count]]))

  it('has the fewest portions, and of those the smallest largest one: all splits tried', () => {
    const pieces = fc.array(decimal(1, 9, 1), { minLength: 1, maxLength: 8 })
    fc.assert(fc.property(pieces, decimal(9, 30, 0), (areas, most) => {
      const sizes = areas.map(area => new D(area))
      const split = divideOnBorders(sizes, area => area.lte(most))
      const all = cuts(areas.length - 1)
        .map(borders => [0, ...borders].map((from, index) => sum(sizes.slice(from, borders[index] ?? areas.length))))
        .filter(portions => portions.every(portion => portion.lte(most)))
      const fewest = all.reduce((least, portions) => (portions.length < least ? portions.length : least), areas.length)
      const largestOf = (portions: readonly InstanceType<typeof D>[]) => D.max(...portions)
      const best = D.min(...all.filter(({ length }) => length === fewest).map(largestOf))
      expect(split).toHaveLength(fewest)
      expect(largestOf(split.map(({ areaM2 }) => areaM2)).minus(best).lte('1e-6')).toBe(true)
    }), { numRuns: 200 })
  })
})

it('pace is measured over all batches together', () => {
  expect(measuredPaceM2PerH([{ areaM2: '10', minutes: '60' }, { areaM2: '2', minutes: '30' }])).toBe('8')
  expect(measuredPaceM2PerH([])).toBeNull()
  expect(workMinutes('21.6', '12')).toBe('108')
  expect(thrownBy(() => workMinutes('1000000', '0.0001'))).toMatchObject(refusal('work-too-long', 'areaM2'))
})
