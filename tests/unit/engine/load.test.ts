import { describe, expect, it } from 'vitest'
import { calculateBatch } from '#shared/engine/batch'
import { calculatePots } from '#shared/engine/pots'
import { byWeight } from './builders'

const batchOf = (components: number, areaM2: string) => calculateBatch({
  mix: byWeight(Array.from({ length: components }, (_, index) => String(100 - index))),
  areaM2, filmWeightGsm: '120', filmWeightIs: 'deposited', coats: 1, transferEfficiencyPct: '60', scaleDivisionG: '0.1',
})

/** CPU milliseconds of this process, so that a busy machine does not count against it. */
function cpuMs(work: () => void): number {
  const before = process.cpuUsage()
  work()
  return process.cpuUsage(before).user / 1000
}

describe('load', () => {
  it('10 000 batches are worked out, each from its own area, with time to spare', () => {
    const totals = new Set<string>()
    const spent = cpuMs(() => {
      for (let i = 1; i <= 10_000; i += 1) totals.add(batchOf(3, String(i)).exactTotalG)
    })
    expect(totals.size).toBe(10_000)
    expect(spent).toBeLessThan(60_000)
  }, 120_000)

  it('cost grows with the components, not with their square', () => {
    const many = (components: number) => () => {
      for (let i = 1; i <= 400; i += 1) batchOf(components, String(i))
    }
    cpuMs(many(8))
    const [one, eight] = [cpuMs(many(1)), cpuMs(many(8))]
    expect(eight).toBeLessThan(one * 40 + 200)
  }, 60_000)

  it('5 000 pieces are divided without reckoning every split', () => {
    const spent = cpuMs(() => {
      const { pots } = calculatePots({
        mix: byWeight(['100', '50', '20']), sprayG: '500000', residueG: '60', areaM2: '2500', cupCapacityG: '5000', scaleDivisionG: '1',
        pieceAreasM2: Array.from({ length: 5000 }, () => '0.5'), paceM2PerH: '20', potLifeMin: '240',
      })
      expect(pots.length).toBeGreaterThan(100)
    })
    expect(spent).toBeLessThan(20_000)
  }, 60_000)
})
