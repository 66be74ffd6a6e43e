import type { Knex } from 'knex'
import { newId } from '../utils/ids'

/** A batch as it goes into the record. Decimals as plain strings already on their columns' scale. */
export interface BatchRecord {
  id: string
  code: string
  planId: string
  potNumber: number
  potCount: number
  outcome: 'mixed' | 'stopped'
  mixRevisionId: string
  jobId: string | null
  jobStepId: string | null
  purpose: string | null
  boothId: string | null
  gunId: string | null
  scaleId: string | null
  mixedByUserId: string
  deviceId: string | null
  mixedAt: Date
  reactiveAt: Date | null
  sealedAt: Date
  targetTotalG: string
  pouredTotalG: string
  areaM2: string | null
  filmWeightGsm: string | null
  filmWeightIs: 'deposited' | 'sprayed' | null
  coats: number | null
  transferEfficiencyPct: string | null
  potLifeMin: string | null
  potLifeBasis: 'sheet' | 'table' | 'held' | 'rule' | null
  lateAt: Date | null
  endsAt: Date | null
  airC: string | null
  rhPct: string | null
  surfaceC: string | null
  materialC: string | null
  viscosityCup: string | null
  viscositySeconds: string | null
  review: string[]
  snapshot: unknown
}

export interface ComponentRecord {
  index: number
  materialId: string
  role: string
  parts: string
  plannedG: string
  targetG: string
  pouredG: string
  deviationPct: string | null
  verdict: string | null
}

export interface PourRecord {
  index: number
  position: number
  lotId: string
  grams: string
  at: Date
  source: string
  round: number
}

/** Writes a batch with all that belongs to it. The rows are never changed again. */
export async function insertBatch(
  batch: BatchRecord, components: readonly ComponentRecord[], pours: readonly PourRecord[], pieceIds: readonly string[], trx: Knex.Transaction,
): Promise<void> {
  await trx('batches').insert({
    id: batch.id, code: batch.code, plan_id: batch.planId, pot_number: batch.potNumber, pot_count: batch.potCount, outcome: batch.outcome,
    mix_revision_id: batch.mixRevisionId, job_id: batch.jobId, job_step_id: batch.jobStepId, purpose: batch.purpose, booth_id: batch.boothId,
    gun_id: batch.gunId, scale_id: batch.scaleId, mixed_by_user_id: batch.mixedByUserId, device_id: batch.deviceId, mixed_at: batch.mixedAt,
    reactive_at: batch.reactiveAt, sealed_at: batch.sealedAt, target_total_g: batch.targetTotalG, poured_total_g: batch.pouredTotalG,
    area_m2: batch.areaM2, film_weight_gsm: batch.filmWeightGsm, film_weight_is: batch.filmWeightIs, coats: batch.coats,
    transfer_efficiency_pct: batch.transferEfficiencyPct, pot_life_min: batch.potLifeMin, pot_life_basis: batch.potLifeBasis,
    late_at: batch.lateAt, ends_at: batch.endsAt, air_c: batch.airC, rh_pct: batch.rhPct, surface_c: batch.surfaceC, material_c: batch.materialC,
    viscosity_cup: batch.viscosityCup, viscosity_seconds: batch.viscositySeconds, review: JSON.stringify(batch.review), snapshot: JSON.stringify(batch.snapshot),
  })
  await trx('batch_components').insert(components.map((one) => ({
    batch_id: batch.id, component_index: one.index, material_id: one.materialId, role: one.role, parts: one.parts, planned_g: one.plannedG,
    target_g: one.targetG, poured_g: one.pouredG, deviation_pct: one.deviationPct, verdict: one.verdict,
  })))
  if (pours.length > 0) {
    await trx('batch_pours').insert(pours.map((one) => ({
      id: newId(), batch_id: batch.id, component_index: one.index, position: one.position, lot_id: one.lotId, grams: one.grams, at: one.at,
      source: one.source, round: one.round,
    })))
  }
  if (pieceIds.length > 0) await trx('batch_pieces').insert(pieceIds.map((pieceId) => ({ batch_id: batch.id, piece_id: pieceId })))
}

/** What happened to a batch after it was made. */
export interface EventRecord {
  batchId: string
  kind: 'first-spray' | 'last-spray' | 'emptied' | 'review-settled' | 'note' | 'gun-flushed'
  at: Date
  userId: string | null
  deviceId: string | null
  gunId: string | null
  boothId: string | null
  details: Record<string, unknown>
  createdAt: Date
}

export async function insertBatchEvent(event: EventRecord, trx: Knex.Transaction): Promise<void> {
  await trx('batch_events').insert({
    id: newId(), batch_id: event.batchId, kind: event.kind, at: event.at, user_id: event.userId, device_id: event.deviceId, gun_id: event.gunId,
    booth_id: event.boothId, details: JSON.stringify(event.details), created_at: event.createdAt,
  })
}

/** Grams thrown away; null where nobody weighed them. */
export interface WasteRecord {
  batchId: string
  kind: 'leftover' | 'stopped-mix'
  chemistry: string | null
  grams: string | null
  disposal: string
  reason: string | null
  userId: string | null
  at: Date
}

export async function insertWaste(waste: WasteRecord, trx: Knex.Transaction): Promise<void> {
  await trx('waste_entries').insert({
    id: newId(), batch_id: waste.batchId, kind: waste.kind, chemistry: waste.chemistry, grams: waste.grams, weighed: waste.grams !== null,
    disposal: waste.disposal, reason: waste.reason, user_id: waste.userId, at: waste.at,
  })
}
