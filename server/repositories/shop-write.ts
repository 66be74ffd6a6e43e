import type { Knex } from 'knex'
import { toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** Tables of what a shop works with. */
export type ShopTable = 'booths' | 'guns' | 'scales' | 'mixing_cups'

export async function insertThing(table: ShopTable, id: string, row: Record<string, unknown>, now: number, db: Db): Promise<void> {
  const at = toInstant(now)
  await db(table).insert({ id, ...row, created_at: at, updated_at: at })
}

export async function updateThing(table: ShopTable, id: string, row: Record<string, unknown>, now: number, db: Db): Promise<void> {
  await db(table).where({ id }).update({ ...row, updated_at: toInstant(now), version: db.raw('version + 1') })
}

/** Holds a row until the transaction ends, so that two changes of one version follow each other. */
export async function holdThing(table: ShopTable | 'users', id: string, trx: Knex.Transaction): Promise<void> {
  await trx(table).where({ id }).forUpdate().first('id')
}

/** MariaDB: a foreign key still points at the row. */
const referenced = 1451

/** Takes a row away. False where something refers to it. */
export async function deleteThing(table: ShopTable, id: string, trx: Knex.Transaction): Promise<boolean> {
  try {
    await trx(table).where({ id }).delete()
    return true
  } catch (error) {
    if (error instanceof Error && 'errno' in error && error.errno === referenced) return false
    throw error
  }
}

/** True while a pot of the booth lives or a batch is being made for it. */
export async function hasLivePots(boothId: string, db: Db): Promise<boolean> {
  const pot = await db('batch_current').where({ booth_id: boothId }).whereIn('state', ['fresh', 'closing', 'life-up', 'no-pot-life']).first('batch_id')
  if (pot !== undefined) return true
  return (await db('batch_drafts').where({ booth_id: boothId, state: 'open' }).first('id')) !== undefined
}
