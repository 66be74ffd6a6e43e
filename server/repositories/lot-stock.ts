import type { Knex } from 'knex'
import { newId } from '../utils/ids'
import { decimalOf } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A lot as pouring looks at it. */
export interface StockLot {
  id: string
  materialId: string
  materialRole: string
  lotNumber: string
  /** Last day that it may be used, `YYYY-MM-DD`. */
  expiresOn: string | null
  state: 'sealed' | 'in-use' | 'empty' | 'blocked'
}

interface LotRow {
  id: string
  material_id: string
  material_role: string
  lot_number: string
  expires_on: string | null
  state: StockLot['state']
}

/**
 * Lots by their ids.
 *
 * @param options.hold locks them, but not their materials, until the transaction ends; in the same order as `lockLots`
 */
export async function findStockLots(ids: readonly string[], db: Db, { hold = false } = {}): Promise<Map<string, StockLot>> {
  if (ids.length === 0) return new Map()
  const query = db('lots as l').whereIn('l.id', [...ids]).orderBy('l.id').select<LotRow[]>(
    'l.id', 'l.material_id', db('materials as m').whereRaw('m.id = l.material_id').select('m.role').as('material_role'), 'l.lot_number', 'l.expires_on', 'l.state',
  )
  const rows = await (hold ? query.forUpdate() : query)
  return new Map(rows.map((row) => [row.id, {
    id: row.id,
    materialId: row.material_id,
    materialRole: row.material_role,
    lotNumber: row.lot_number,
    expiresOn: row.expires_on,
    state: row.state,
  }]))
}

/** Locks the lots in the order of their ids, so that two batches from the same tins wait instead of dying of each other. */
export async function lockLots(ids: readonly string[], trx: Knex.Transaction): Promise<void> {
  if (ids.length > 0) await trx('lots').whereIn('id', [...ids]).orderBy('id').forUpdate().select('id')
}

/** What left a lot for a batch, in grams above nothing. */
export interface Drawn {
  lotId: string
  grams: string
  at: Date
}

/** Books what a batch took and marks lots whose stock cannot be right for counting. */
export async function drawFromLots(
  drawn: readonly Drawn[], batchId: string, userId: string, now: Date, trx: Knex.Transaction,
): Promise<{ id: string; stockG: string }[]> {
  if (drawn.length === 0) return []
  await trx('lot_movements').insert(drawn.map(({ lotId, grams, at }) => ({
    id: newId(), lot_id: lotId, kind: 'poured', grams: `-${grams}`, batch_id: batchId, user_id: userId, at, created_at: now,
  })))
  const stock = await stockOf(drawn.map(({ lotId }) => lotId), trx)
  await markShort(stock, now, trx)
  return stock
}

/** Marks lots from which more was taken than was booked in for counting. */
export async function markShort(stock: readonly { id: string; stockG: string }[], now: Date, trx: Knex.Transaction): Promise<void> {
  const short = stock.filter(({ stockG }) => stockG.startsWith('-')).map(({ id }) => id)
  if (short.length === 0) return
  await trx('lots').whereIn('id', short).where({ count_needed: false })
    .update({ count_needed: true, updated_at: now, version: trx.raw('version + 1') })
}

/** A tin that was sealed is in use from its first pour on; one in any other state is left as it is. */
export async function openLots(pours: readonly Pick<Drawn, 'lotId' | 'at'>[], now: Date, trx: Knex.Transaction): Promise<void> {
  if (pours.length === 0) return
  const pouredAt = trx.raw(`COALESCE(opened_at, CASE id ${pours.map(() => 'WHEN ? THEN ?').join(' ')} END)`, pours.flatMap(({ lotId, at }) => [lotId, at]))
  await trx('lots').whereIn('id', pours.map(({ lotId }) => lotId)).where({ state: 'sealed' })
    .update({ state: 'in-use', opened_at: pouredAt, updated_at: now, version: trx.raw('version + 1') })
}

/** Present stock by the movements, in grams; a lot without any is left out; below nothing when more was poured than was booked in. */
export async function stockOf(lotIds: readonly string[], db: Db): Promise<{ id: string; stockG: string }[]> {
  const rows = await db('lot_movements').whereIn('lot_id', [...lotIds]).groupBy('lot_id').orderBy('lot_id')
    .select<{ lot_id: string; stock: string }[]>('lot_id', db.raw('SUM(grams) AS stock'))
  return rows.map(({ lot_id: id, stock }) => ({ id, stockG: decimalOf(stock) }))
}
