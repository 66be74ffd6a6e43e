import { describe, expect, it } from 'vitest'
import { reviewCodes, type Batch } from '#shared/schemas/batches'
import { amendFields, amendLabel, amendValue } from '~/utils/amend-fields'
import { causeWords, reviewWords, worstRoleOf } from '~/utils/batch-words'
import { lifeWorking, totalWorking, workingOf } from '~/utils/batch-working'

const pour = { position: 0, lotId: 'l1', lotNumber: '26-1107', grams: '725.5', at: '2026-11-17T07:00:00.000Z', source: 'typed', round: 0 } as const
const component = (index: number, role: 'base' | 'hardener', materialCode: string, pours: object[], deviationPct: string | null) =>
  ({ index, role, materialCode, materialName: `${materialCode} name`, materialId: `m${index}`, pours, deviationPct })
const line = (what: string) => ({ what, formula: 'a', value: '1', unit: 'g' })
const batch = {
  outcome: 'mixed', reactiveAt: '2026-11-17T07:00:00.000Z', firstSprayAt: null, lastSprayAt: null, closedAt: null, leftoverG: null, gunId: null, boothId: null,
  mixedByUserId: 'u1', purpose: null, note: null, climate: null, viscosity: null, worstDeviationPct: '-6.1',
  components: [component(0, 'base', 'AT-320', [pour], null), component(1, 'hardener', 'AH-32', [pour, { ...pour, position: 1, grams: '10' }], '-6.1')],
  working: ['on the panel', 'AH-32 name, exact', 'AH-32 name, target', 'AH-32 name, target by the AT-320 name as poured', 'AH-32 name, off the ratio', 'AT-320 name, target', 'pot life at 20 °C'].map(line),
} as unknown as Batch

describe('what can be put right', () => {
  it('is offered once it has happened, with what it says now', () => {
    const fields = amendFields(batch).map(({ field }) => field)
    expect(fields).toContain('reactiveAt')
    for (const field of ['firstSprayAt', 'lastSprayAt', 'closedAt', 'leftoverG']) expect(fields).not.toContain(field)
    expect(amendFields({ ...batch, closedAt: '2026-11-17T09:00:00.000Z' } as Batch).map(({ field }) => field)).toContain('leftoverG')
    expect(amendFields(batch).find(({ field }) => field === 'pours.1.1.grams')).toMatchObject({ label: 'AH-32, weighing 2: grams', value: '10' })
  })

  it('is called alike in the list of amendments', () => {
    expect(amendLabel('pours.0.0.lotId', batch)).toBe('AT-320: lot')
    expect(amendLabel('closedAt', batch)).toBe('Emptied time')
  })

  it.each([
    ['pours.0.0.grams', '1490.5', null, '1\u2009490.5 g'], ['closedAt', '2026-11-17T16:20:00.000Z', null, 'Tue 17 Nov 17:20:00'], ['gunId', 'g1', 'Gun 4', 'Gun 4'],
    ['leftoverG', null, null, 'nothing'], ['viscosityCup', 'din-4', null, 'DIN 4 mm cup'], ['airC', '20.5', null, '20.5 °C'], ['note', 'Popping', null, 'Popping'],
  ])('%s shows %j as words', (field, value, name, text) => {
    expect(amendValue(field, value, name, 'Europe/Berlin', Date.parse('2026-11-18T08:00:00.000Z'))).toBe(text)
  })
})

describe('the words of the log', () => {
  it('explain every code that a foreman settles, with what to look at', () => {
    for (const code of reviewCodes) expect(reviewWords[code].long.length * reviewWords[code].look.length).toBeGreaterThan(0)
  })
  it('name the component furthest off, and why a correction was offered', () => {
    expect(worstRoleOf(batch)).toBe('hardener')
    expect(causeWords('reactive-too-much')).toBe('too much of what reacts')
    expect(causeWords('something-new')).toBe('something new')
  })
})

describe('the working of a figure', () => {
  const hardener = { materialName: 'AH-32 name' }
  it.each([['planned', ['AH-32 name, exact', 'AH-32 name, target']], ['target', ['AH-32 name, target by the AT-320 name as poured']], ['deviation', ['AH-32 name, off the ratio']]] as const)('%s is its own lines', (figure, whats) => {
    expect(workingOf(batch, hardener, figure).map(({ what }) => what)).toEqual(whats)
  })
  it('of the base\'s target is the planned one; of the total and the life what belongs to no component', () => {
    expect(workingOf(batch, { materialName: 'AT-320 name' }, 'target').map(({ what }) => what)).toEqual(['AT-320 name, target'])
    expect(totalWorking(batch).map(({ what }) => what)).toEqual(['on the panel'])
    expect(lifeWorking(batch).map(({ what }) => what)).toEqual(['pot life at 20 °C'])
  })
})
