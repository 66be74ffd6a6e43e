import type { BenchBooth, BenchSnapshot } from '#shared/schemas/bench'
import type { Gun } from '#shared/schemas/shop'
import { toMs } from '#shared/utils/instant'
import { shopDate, startOfShopDay } from '#shared/utils/zone'
import type { Knex } from 'knex'
import { listBenchCups, listBenchMaterials, listBenchMixes, listBenchLots, listBenchPeople, listHeldMixes, listOpenDrafts } from '../repositories/bench'
import { readHead } from '../repositories/events'
import { readShop } from '../repositories/settings'
import { listBooths, listGuns, listScales } from '../repositories/shop'
import { readConsistent } from '../repositories/snapshot'
import { listBoothRules } from '../repositories/booth-cleanings'
import type { Context } from '../utils/context'
import { isoOf, toInstant } from '../utils/rows'
import { benchSteps, readBenchFacts } from './bench-steps'
import { benchPaces } from './bench-paces'
import { boothPast } from './booth-guard'
import { latestClimate } from './climate'

/** A shop has a handful of booths, guns and scales; no list of them is longer. */
const all = { inactive: false, after: null, limit: 500 }

/** A reading older than this says nothing about the air at the bench. */
const climateMs = 12 * 3_600_000

/** All that a bench works from, as it stood when event `lastSeq` had been committed. */
export function readBench(ctx: Context): Promise<BenchSnapshot> {
  return readConsistent(ctx.db, async (trx) => {
    const lastSeq = await readHead(trx)
    const now = await ctx.clock.now(trx)
    const { zone } = await readShop(trx)
    const today = shopDate(now, zone)
    const heldMixes = await listHeldMixes(trx)
    return {
      serverNow: isoOf(toInstant(now)),
      lastSeq,
      mixes: await listBenchMixes(trx),
      heldMixes,
      materials: await listBenchMaterials(heldMixes.flatMap(({ components }) => components.map(({ materialId }) => materialId)), trx),
      lots: await listBenchLots(trx),
      guns: (await listGuns(all, trx)).map(toBenchGun),
      scales: (await listScales(all, trx)).map(({ id, name, source, divisionG, capacityG, mpeG }) => ({ id, name, source, divisionG, capacityG, mpeG })),
      cups: await listBenchCups(trx),
      booths: await benchBooths(now, trx),
      people: await listBenchPeople(trx),
      today: benchSteps(await readBenchFacts({ now, today, dayStart: startOfShopDay(today, zone) }, trx)),
      drafts: await listOpenDrafts(trx),
      chemistryRules: await listBoothRules(trx),
      paces: await benchPaces(now, trx),
    }
  })
}

function toBenchGun(gun: Gun) {
  return {
    id: gun.id,
    name: gun.name,
    kind: gun.kind,
    boothId: gun.boothId,
    efficiencyPct: { flat: gun.efficiencyFlatPct, frames: gun.efficiencyFramesPct, sticks: gun.efficiencySticksPct },
    efficiencyMeasured: gun.efficiencyMeasured,
    residueG: gun.residueG,
    smallestFillG: gun.smallestFillG,
    flowGPerMin: gun.flowGPerMin,
    paceM2PerH: gun.paceM2PerH,
  }
}

async function benchBooths(now: number, trx: Knex.Transaction): Promise<BenchBooth[]> {
  const booths = await listBooths(all, trx)
  const readings = await latestClimate(trx)
  const answer: BenchBooth[] = []
  for (const { id, name } of booths) {
    const { past, cleanedAt } = await boothPast(id, now, trx)
    const reading = readings.get(id)
    const isFresh = reading !== undefined && now - toMs(reading.at) <= climateMs
    const climate = isFresh ? { airC: reading.airC, rhPct: reading.rhPct, surfaceC: reading.surfaceC, at: reading.at } : null
    answer.push({ id, name, past, cleanedAt, climate })
  }
  return answer
}
