import type { Knex } from 'knex'
import type { LotCreateBody, LotEvent, LotMovement, LotPatchBody } from '#shared/schemas/lots'
import { newId } from '../utils/ids'
import { isoOf, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction
type State = 'sealed' | 'in-use' | 'empty' | 'blocked'

export async function insertLot(id: string, lot: LotCreateBody, now: number, trx: Knex.Transaction): Promise<void> {
  const at = toInstant(now)
  await trx('lots').insert({
    id, material_id: lot.materialId, lot_number: lot.lotNumber, received_on: lot.receivedOn, expires_on: lot.expiresOn,
    price_per_kg: lot.pricePerKg, place: lot.place, state: 'sealed', created_at: at, updated_at: at,
  })
}

/** The id of the lot of this material with this number, whatever its case, or null. */
export async function findLotByNumber(materialId: string, lotNumber: string, db: Db): Promise<string | null> {
  const row = await db('lots').where({ material_id: materialId, lot_number: lotNumber }).first<{ id: string } | undefined>('id')
  return row?.id ?? null
}

interface NewMovement {
  lotId: string
  kind: LotMovement['kind']
  /** Above 0 comes, below 0 goes. */
  grams: string
  reason: string | null
  userId: string | null
}

export async function insertMovement(movement: NewMovement, now: number, trx: Knex.Transaction): Promise<string> {
  const id = newId()
  const at = toInstant(now)
  await trx('lot_movements').insert({
    id, lot_id: movement.lotId, kind: movement.kind, grams: movement.grams, reason: movement.reason, user_id: movement.userId, at, created_at: at,
  })
  return id
}

/** Writes what is given. The row must be locked. */
export async function updateLot(id: string, fields: Omit<LotPatchBody, 'version'>, now: number, trx: Knex.Transaction): Promise<void> {
  const columns = {
    lot_number: fields.lotNumber, received_on: fields.receivedOn, expires_on: fields.expiresOn, price_per_kg: fields.pricePerKg, place: fields.place,
  }
  const given = Object.fromEntries(Object.entries(columns).filter(([, value]) => value !== undefined))
  await trx('lots').where({ id }).update({ ...given, ...touched(now, trx) })
}

export async function setLotState(id: string, state: State, blockedReason: string | null, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('lots').where({ id }).update({ state, blocked_reason: blockedReason, ...touched(now, trx) })
}

/** What a count settles: nobody has to weigh the lot any more. */
export async function setCounted(id: string, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('lots').where({ id }).update({ count_needed: false, ...touched(now, trx) })
}

const touched = (now: number, trx: Knex.Transaction) => ({ updated_at: toInstant(now), version: trx.raw('version + 1') })

export async function insertLotEvent(
  lotId: string, kind: LotEvent['kind'], reason: string, userId: string | null, now: number, trx: Knex.Transaction,
): Promise<string> {
  const id = newId()
  await trx('lot_events').insert({ id, lot_id: lotId, kind, reason, user_id: userId, at: toInstant(now) })
  return id
}

interface EventRow {
  id: string
  kind: LotEvent['kind']
  reason: string
  user_name: string | null
  at: Date
}

/** When a lot was blocked and released, newest first. */
export async function listLotEvents(lotId: string, db: Db): Promise<LotEvent[]> {
  const rows = await db('lot_events as e').leftJoin('users as u', 'u.id', 'e.user_id').where('e.lot_id', lotId)
    .orderBy([{ column: 'e.at', order: 'desc' }, { column: 'e.id', order: 'desc' }])
    .select<EventRow[]>('e.id', 'e.kind', 'e.reason', 'u.name as user_name', 'e.at')
  return rows.map(({ id, kind, reason, user_name: userName, at }) => ({ id, kind, reason, userName, at: isoOf(at) }))
}

interface WasteRow {
  lotId: string
  chemistry: string
  grams: string
  disposal: string
  reason: string
  userId: string | null
}

/** Material that left the shop unused, weighed. */
export async function insertLotWaste(waste: WasteRow, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('waste_entries').insert({
    id: newId(), lot_id: waste.lotId, kind: 'expired', chemistry: waste.chemistry, grams: waste.grams, weighed: true,
    disposal: waste.disposal, reason: waste.reason, user_id: waste.userId, at: toInstant(now),
  })
}
