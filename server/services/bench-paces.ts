import type { Knex } from 'knex'
import { D, sum } from '#shared/engine/decimal'
import type { BenchPace } from '#shared/schemas/bench'
import { listSprayedPots, type SprayedPot } from '../repositories/sprayed-pots'
import { toInstant } from '../utils/rows'

/** How far back and over how many pots a pace is measured; fewer than three say nothing. Common practice, no source. */
const daysBack = 90
const potsAtMost = 20
const potsAtLeast = 3
const readAtMost = 2_000
/** A pot that was sprayed in less is a slip of the finger, not a pace; minutes. */
const leastMin = 1

/** Pace of each person with each gun over the last pots, from first to last spray with turning and racking. */
export async function benchPaces(now: number, db: Knex | Knex.Transaction): Promise<BenchPace[]> {
  return pacesOf(await listSprayedPots(toInstant(now - daysBack * 86_400_000), readAtMost, db))
}

/** Σ area × coats ÷ Σ time, to a tenth; pots come the youngest first. */
function pacesOf(pots: readonly SprayedPot[]): BenchPace[] {
  const byHand = new Map<string, SprayedPot[]>()
  for (const pot of pots) {
    const key = `${pot.userId} ${pot.gunId}`
    const known = byHand.get(key) ?? []
    if (pot.lastAt - pot.firstAt >= leastMin * 60_000 && known.length < potsAtMost) byHand.set(key, [...known, pot])
  }
  return [...byHand.values()].flatMap((own) => {
    const [first] = own
    if (first === undefined || own.length < potsAtLeast) return []
    const hours = sum(own.map(({ firstAt, lastAt }) => new D(lastAt - firstAt))).div(3_600_000)
    const m2PerH = sum(own.map(({ areaM2, coats }) => new D(areaM2).times(coats))).div(hours).toDecimalPlaces(1)
    return m2PerH.lte(0) ? [] : [{ userId: first.userId, gunId: first.gunId, m2PerH: m2PerH.toString(), batches: own.length }]
  })
}
