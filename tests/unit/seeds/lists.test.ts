import { describe, expect, it } from 'vitest'
import { chemistryRules } from '#shared/reference/chemistry-rules'
import { grainUm } from '#shared/reference/grits'
import { hazardStatements } from '#shared/reference/hazard-statements'
import { planBatch } from '#shared/engine/batch'
import { cutLists, areaOf, m2Of } from '../../../seeds/demo/cut-lists'
import { rackPieces } from '../../../seeds/demo/jobs'
import { materials } from '../../../seeds/demo/materials'
import { mixes, practiceMix } from '../../../seeds/demo/mixes'
import { looseMixes, orders } from '../../../seeds/demo/orders'
import { boothOf, schedules } from '../../../seeds/demo/schedules'
import { mixInputOf } from '../../../seeds/demo/pot'
import { chemistryOf, paperJob, paperShop } from './builders'

const allOrders = [...orders[1], ...orders[2], ...orders[3]]
const revisionsOf = mixes.flatMap(({ code, revisions }) => revisions.map((revision, index) => ({ code, number: index + 1, revision })))
const coats = schedules.flatMap(({ revisions }) => revisions.flatMap(({ steps }) => steps.filter(({ kind }) => kind === 'coat')))
const codes = <T extends { code: string }>(list: readonly T[]) => list.map(({ code }) => code)

describe('lists of the demo shop', () => {
  it('name each thing once', () => {
    for (const list of [codes(materials), codes(mixes), codes(schedules)]) expect(new Set(list).size).toBe(list.length)
  })

  it('carry hazard statements of the reference table only', () => {
    const known = new Set(codes(hazardStatements))
    expect(materials.flatMap(({ hazards }) => hazards).filter((code) => !known.has(code))).toEqual([])
    expect(materials.filter(({ isocyanates, hazards }) => isocyanates && !hazards.includes('EUH204'))).toEqual([])
  })

  it('cover the ratios of common practice', () => {
    const ratios = new Set(revisionsOf.map(({ revision }) => revision.parts.map(({ parts }) => parts).join(':')))
    for (const ratio of ['100:40', '100:40:30', '100:50:30', '100:30:30', '100:80:40', '100:80:30', '100:10:30', '100:10:40', '100:600', '10:300', '100:100', '100:2:2']) {
      expect(ratios).toContain(ratio)
    }
  })

  it.each(revisionsOf)('$code, revision $number, can be planned by the arithmetic', ({ revision }) => {
    const plan = planBatch({ mix: mixInputOf(paperShop(), revision), totalG: '1000', scaleDivisionG: '0.1' })
    expect(plan.components).toHaveLength(revision.parts.length)
    const reacts = revision.parts.some(({ reactive }) => reactive)
    expect(reacts).toBe(revision.potLifeMin !== undefined || revision.potLifeTable !== undefined)
  })

  it('use every mix in a schedule or a loose mix, the practice mix aside', () => {
    const used = new Set([practiceMix, ...coats.map(({ mix }) => mix), ...looseMixes.map(({ mix }) => mix)])
    expect(codes(mixes).filter((code) => !used.has(code))).toEqual([])
  })

  it('order by schedules that exist, and by all of them', () => {
    expect(new Set(allOrders.map(({ schedule }) => schedule))).toEqual(new Set(codes(schedules)))
    expect(new Set(allOrders.map(({ title, customer }) => `${title} ${customer}`)).size).toBe(allOrders.length)
  })

  it('sand with grits of the standard, P380 of the trade aside', () => {
    const grits = schedules.flatMap(({ revisions }) => revisions.flatMap(({ steps }) => steps.flatMap(({ grit }) => grit ?? [])))
    expect(grits.filter((grit) => grit !== 'P380' && grainUm(grit) === null)).toEqual([])
  })

  it('put no two chemistries into one booth that must not meet there', () => {
    const inBooth = (booth: number) => new Set(codes(mixes).map(chemistryOf).filter((chemistry) => boothOf(chemistry) === booth))
    const clashes = [1, 2, 3].flatMap((booth) => chemistryRules.filter(({ scope, verdict, first, second }) =>
      scope === 'booth' && verdict === 'blocked' && first !== second && inBooth(booth).has(first) && inBooth(booth).has(second)))
    expect(clashes).toEqual([])
  })
})

describe('cut lists', () => {
  it('are exact to the square millimetre', () => {
    const door = { label: 'Door', lengthMm: 716, widthMm: 597, thicknessMm: 19, quantity: 3, faces: 'all' } as const
    expect(areaOf(door)).toEqual({ mm2: 3 * (2 * 716 * 597 + 2 * (716 + 597) * 19), m2: '2.714394' })
    expect(areaOf({ ...door, faces: 'front', quantity: 1 }).m2).toBe('0.427452')
    expect(m2Of(5)).toBe('0.000005')
  })

  it.each(Object.entries(cutLists))('%s: racks hold every piece once and about the same area', (_name, list) => {
    for (const size of [1, 2, 3, 4]) {
      const pieces = list(size)
      const racked = rackPieces(pieces)
      const count = (of: readonly { quantity: number }[]) => of.reduce((sum, { quantity }) => sum + quantity, 0)
      expect(count(racked)).toBe(count(pieces))
      const racks = new Set(racked.map(({ rack }) => rack))
      expect([...racks].sort((a, b) => a - b)).toEqual([...racks.keys()])
      const areas = [...racks].map((rack) => racked.filter((piece) => piece.rack === rack).reduce((sum, piece) => sum + areaOf(piece).mm2, 0))
      expect(Math.max(...areas)).toBeLessThan(13_000_000)
    }
  })

  it.each(allOrders)('$title: every coat has its booth and its gun', (order) => {
    const steps = paperJob(order, 'J').steps.filter(({ step }) => step.kind === 'coat')
    expect(steps.length).toBeGreaterThan(1)
    expect(steps.filter(({ booth, gun }) => booth === null || gun === null)).toEqual([])
  })
})
