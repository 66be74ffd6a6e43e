import type { Knex } from 'knex'
import type { Lot, LotBatch, LotCondition, LotListQuery, LotMovement } from '#shared/schemas/lots'
import { lowSharePct } from '#shared/schemas/lots'
import type { MaterialRole } from '#shared/schemas/material-roles'
import { decimalOf, decimalOrNull, isoOf, isoOrNull } from '../utils/rows'
import { whereContains } from './search'

type Db = Knex | Knex.Transaction

/** A lot as stored, with its sums. What it means today is for the service to say. */
export type StoredLot = Omit<Lot, 'condition' | 'expiresInDays' | 'batchCount' | 'low' | 'stockWorking' | 'movements' | 'batches' | 'events'>

/** The days that decide what a lot is: today's date and the last use-by date that counts as soon. */
export interface LotDays {
  today: string
  soon: string
}

/** Where the page before ended. `on` is the day that the order goes by. */
export interface LotKey {
  on: string
  id: string
}

export type LotFilter = Omit<LotListQuery, 'cursor' | 'limit' | 'expiresWithinDays'> & { expiresBy?: string }

interface Row {
  id: string
  lot_number: string
  material_id: string
  material_code: string
  material_name: string
  material_role: MaterialRole
  state: Lot['state']
  blocked_reason: string | null
  received_on: string
  expires_on: string | null
  opened_at: Date | null
  place: string | null
  price_per_kg: string | null
  received_g: string
  stock_g: string
  stock_pct: string | null
  count_needed: number
  version: number
  created_at: Date
  updated_at: Date
}

const toLot = (row: Row): StoredLot => ({
  id: row.id,
  lotNumber: row.lot_number,
  materialId: row.material_id,
  materialCode: row.material_code,
  materialName: row.material_name,
  materialRole: row.material_role,
  state: row.state,
  blockedReason: row.blocked_reason,
  receivedOn: row.received_on,
  expiresOn: row.expires_on,
  openedAt: isoOrNull(row.opened_at),
  place: row.place,
  pricePerKg: decimalOrNull(row.price_per_kg),
  receivedG: decimalOf(row.received_g),
  stockG: decimalOf(row.stock_g),
  stockPct: decimalOrNull(row.stock_pct),
  countNeeded: row.count_needed === 1,
  version: row.version,
  createdAt: isoOf(row.created_at),
  updatedAt: isoOf(row.updated_at),
})

/** Grams in a lot: the sum of its movements. `l` names the lot's row. */
export const stockSql = '(SELECT COALESCE(SUM(v.grams), 0) FROM lot_movements v WHERE v.lot_id = l.id)'
const receivedSql = `(SELECT COALESCE(SUM(v.grams), 0) FROM lot_movements v
  WHERE v.lot_id = l.id AND (v.kind = 'received' OR (v.kind = 'split' AND v.grams > 0)))`

/** True of a lot that may be poured on the day bound to it: its use-by date is the last day that counts. */
export const usableSql = "(l.state IN ('sealed', 'in-use') AND (l.expires_on IS NULL OR l.expires_on >= ?))"

/** Lots without a use-by date come after all that have one. */
const expirySql = "COALESCE(l.expires_on, '9999-12-31')"

const select = (db: Db) => db('lots as l')
  .join('materials as m', 'm.id', 'l.material_id')
  .select<Row[]>('l.*', 'm.code as material_code', 'm.name as material_name', 'm.role as material_role',
    db.raw(`${receivedSql} AS received_g`), db.raw(`${stockSql} AS stock_g`),
    db.raw(`ROUND(100 * ${stockSql} / NULLIF(${receivedSql}, 0), 4) AS stock_pct`))

/** Lots that pass the filter, in its order. */
export async function listLots(filter: LotFilter, days: LotDays, page: { after: LotKey | null, limit: number }, db: Db): Promise<StoredLot[]> {
  const query = select(db)
  if (filter.materialId) void query.where('l.material_id', filter.materialId)
  if (filter.state) whereCondition(query, filter.state, days)
  if (filter.expiresBy) void query.where('l.expires_on', '<=', filter.expiresBy).whereNot('l.state', 'empty')
  if (filter.low !== undefined) whereLow(query, filter.low)
  if (filter.usable !== undefined) void query.whereRaw(filter.usable ? usableSql : `NOT ${usableSql}`, [days.today])
  if (filter.q) whereContains(query, ['l.lot_number', 'm.code', 'm.name'], filter.q)
  turn(query, filter.order, page.after)
  return (await query.limit(page.limit)).map(toLot)
}

/** The lots of one material that are not used up, first the one that runs out of date first. */
export async function listLotsOfMaterial(materialId: string, db: Db): Promise<StoredLot[]> {
  const rows = await select(db).where('l.material_id', materialId).whereNot('l.state', 'empty').orderByRaw(`${expirySql}, l.received_on, l.id`)
  return rows.map(toLot)
}

export async function findLot(id: string, db: Db): Promise<StoredLot | null> {
  const [row] = await select(db).where('l.id', id)
  return row ? toLot(row) : null
}

function turn(query: Knex.QueryBuilder, order: LotFilter['order'], after: LotKey | null): void {
  if (order === 'first-expiring') {
    if (after) void query.whereRaw(`(${expirySql}, l.id) > (?, ?)`, [after.on, after.id])
    void query.orderByRaw(`${expirySql}, l.id`)
    return
  }
  if (after) void query.whereRaw('(l.received_on, l.id) < (?, ?)', [after.on, after.id])
  void query.orderBy([{ column: 'l.received_on', order: 'desc' }, { column: 'l.id', order: 'desc' }])
}

/** The same decision as the service makes for one lot, for all of them. */
function whereCondition(query: Knex.QueryBuilder, condition: LotCondition, { today, soon }: LotDays): void {
  if (condition === 'blocked') void query.where('l.state', 'blocked')
  else if (condition === 'used-up') void query.where('l.state', 'empty')
  else if (condition === 'out-of-date') void query.whereNotIn('l.state', ['blocked', 'empty']).where('l.expires_on', '<', today)
  else if (condition === 'runs-out') void query.whereNotIn('l.state', ['blocked', 'empty']).whereBetween('l.expires_on', [today, soon])
  else void query.where('l.state', condition).where(far => far.whereNull('l.expires_on').orWhere('l.expires_on', '>', soon))
}

function whereLow(query: Knex.QueryBuilder, low: boolean): void {
  const sql = `(l.state <> 'empty' AND ${stockSql} * 100 <= ${receivedSql} * ?)`
  void query.whereRaw(low ? sql : `NOT ${sql}`, [lowSharePct])
}

/** How many batches each lot went into. */
export async function countBatches(lotIds: readonly string[], db: Db): Promise<Map<string, number>> {
  if (lotIds.length === 0) return new Map()
  const rows = await db('batch_uses').whereIn('used_id', [...lotIds]).groupBy('used_id')
    .select<{ used_id: string, batches: string }[]>('used_id', db.raw('COUNT(DISTINCT batch_id) AS batches'))
  return new Map(rows.map(row => [row.used_id, Number(row.batches)]))
}

/** What came to a lot and left it, kind by kind. */
export async function sumMovements(lotId: string, db: Db): Promise<{ kind: LotMovement['kind'], grams: string }[]> {
  const rows = await db('lot_movements').where('lot_id', lotId).groupBy('kind').orderBy('kind')
    .select<{ kind: LotMovement['kind'], grams: string }[]>('kind', db.raw('SUM(grams) AS grams'))
  return rows.map(row => ({ kind: row.kind, grams: decimalOf(row.grams) }))
}

interface MovementRow {
  id: string
  kind: LotMovement['kind']
  grams: string
  batch_id: string | null
  batch_code: string | null
  reason: string | null
  user_name: string | null
  at: Date
}

/** The latest movements of a lot, newest first. */
export async function listMovements(lotId: string, limit: number, db: Db): Promise<LotMovement[]> {
  const rows = await db('lot_movements as v')
    .leftJoin('batches as b', 'b.id', 'v.batch_id')
    .leftJoin('users as u', 'u.id', 'v.user_id')
    .where('v.lot_id', lotId)
    .orderBy([{ column: 'v.at', order: 'desc' }, { column: 'v.id', order: 'desc' }]).limit(limit)
    .select<MovementRow[]>('v.id', 'v.kind', 'v.grams', 'v.batch_id', 'b.code as batch_code', 'v.reason', 'u.name as user_name', 'v.at')
  return rows.map(row => ({
    id: row.id, kind: row.kind, grams: decimalOf(row.grams), batchId: row.batch_id, batchCode: row.batch_code,
    reason: row.reason, userName: row.user_name, at: isoOf(row.at),
  }))
}

interface BatchRow {
  id: string
  code: string
  mixed_at: Date
  grams: string
  mix_code: string
  mix_name: string
  job_id: string | null
  job_code: string | null
  purpose: string | null
}

/** The latest batches that a lot went into, newest first, with the grams that the record now holds. */
export async function listLotBatches(lotId: string, limit: number, db: Db): Promise<LotBatch[]> {
  const rows = await db('batches as b')
    .join('mix_revisions as r', 'r.id', 'b.mix_revision_id')
    .join('mixes as x', 'x.id', 'r.mix_id')
    .leftJoin('jobs as j', 'j.id', 'b.job_id')
    .whereIn('b.id', db('batch_uses as o').where('o.used_id', lotId).select('o.batch_id'))
    .orderBy([{ column: 'b.mixed_at', order: 'desc' }, { column: 'b.id', order: 'desc' }]).limit(limit)
    .select<BatchRow[]>('b.id', 'b.code', 'b.mixed_at', 'x.code as mix_code', 'x.name as mix_name', 'j.id as job_id', 'j.code as job_code', 'b.purpose',
      db.raw("(SELECT COALESCE(-SUM(v.grams), 0) FROM lot_movements v WHERE v.lot_id = ? AND v.batch_id = b.id AND v.kind IN ('poured', 'compensation')) AS grams", [lotId]))
  return rows.map(row => ({
    id: row.id, code: row.code, mixedAt: isoOf(row.mixed_at), grams: decimalOf(row.grams), mixCode: row.mix_code, mixName: row.mix_name,
    jobId: row.job_id, jobCode: row.job_code, purpose: row.purpose,
  }))
}
