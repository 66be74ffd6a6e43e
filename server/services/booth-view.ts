import type { Knex } from 'knex'
import type { LiveBooth } from '#shared/schemas/live'
import { findBooth, listBooths, listGuns } from '../repositories/shop'
import type { Mutation } from '../utils/transactions'
import { clearances } from './clearance'
import { latestClimate } from './climate'

/** A shop has a handful of booths and guns; no list of them is longer. */
const most = 200
const all = { inactive: false, after: null, limit: most }

/** Booths in use as the walls show them at `now` (epoch milliseconds): one of them, or all. */
export async function liveBooths(boothId: string | null, now: number, db: Knex | Knex.Transaction): Promise<LiveBooth[]> {
  const booths = boothId === null ? await listBooths(all, db) : [await findBooth(boothId, db)].filter((booth) => booth?.active === true)
  const climate = await latestClimate(db)
  const clearance = await clearances(boothId, now, db)
  const guns = await listGuns(all, db)
  return booths
    .filter((booth) => booth !== null)
    .map(({ id, name, clearanceMin, extraction }) => ({
      id, name, clearanceMin, extraction,
      climate: climate.get(id) ?? null,
      clearance: clearance.get(id) ?? null,
      guns: guns.filter((gun) => gun.boothId === null || gun.boothId === id).map((gun) => ({ id: gun.id, name: gun.name })),
    }))
}

/** One booth as its wall shows it. @throws Error when it is none that is in use */
export async function liveBooth(boothId: string, now: number, db: Knex | Knex.Transaction): Promise<LiveBooth> {
  const [booth] = await liveBooths(boothId, now, db)
  if (!booth) throw new Error('a booth was lost in its own transaction')
  return booth
}

/** Tells the screens what a booth is now, as this transaction leaves it. One that is out of use is not told. */
export async function publishBooth(m: Mutation, boothId: string): Promise<void> {
  const [booth] = await liveBooths(boothId, m.now, m.trx)
  if (booth) m.publish({ type: 'booth', subject: `booth:${boothId}`, boothId, payload: booth })
}
