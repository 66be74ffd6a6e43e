import type { Knex } from 'knex'
import type { BatchState } from '#shared/schemas/batch-states'
import { msOrNull, toInstant, toInstantOrNull } from '../utils/rows'

/** What a batch is when it is sealed. Instants are epoch milliseconds. */
export interface NewCurrent {
  batchId: string
  state: BatchState
  mixedAt: number
  boothId: string | null
  reactiveAt: number | null
  lateAt: number | null
  endsAt: number | null
  closedAt: number | null
  jobId: string | null
  mixedByUserId: string
  gunId: string | null
  purpose: string | null
  pouredTotalG: string
  worstDeviationPct: string | null
  worstRole: string | null
  outOfTolerance: boolean
  corrected: boolean
  reviewOpen: boolean
}

export async function insertCurrent(current: NewCurrent, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('batch_current').insert({
    batch_id: current.batchId, state: current.state, mixed_at: toInstant(current.mixedAt), booth_id: current.boothId,
    reactive_at: toInstantOrNull(current.reactiveAt), late_at: toInstantOrNull(current.lateAt), ends_at: toInstantOrNull(current.endsAt),
    closed_at: toInstantOrNull(current.closedAt), job_id: current.jobId, mixed_by_user_id: current.mixedByUserId, gun_id: current.gunId,
    purpose: current.purpose, poured_total_g: current.pouredTotalG, worst_deviation_pct: current.worstDeviationPct, worst_role: current.worstRole, out_of_tolerance: current.outOfTolerance,
    corrected: current.corrected, review_open: current.reviewOpen, created_at: toInstant(now), updated_at: toInstant(now),
  })
}

/** What a batch is now, as far as spraying and emptying look at it. Instants are epoch milliseconds. */
export interface CurrentBatch {
  id: string
  code: string
  state: BatchState
  mixName: string
  planId: string
  jobId: string | null
  jobStepId: string | null
  coats: number | null
  gunId: string | null
  boothId: string | null
  mixedAt: number
  reactiveAt: number | null
  lateAt: number | null
  endsAt: number | null
  firstSprayAt: number | null
  lastSprayAt: number | null
  closedAt: number | null
  pouredTotalG: string
}

interface CurrentRow {
  batch_id: string
  code: string
  state: BatchState
  mix_name: string
  plan_id: string
  job_id: string | null
  job_step_id: string | null
  coats: number | null
  gun_id: string | null
  booth_id: string | null
  mixed_at: Date
  reactive_at: Date | null
  late_at: Date | null
  ends_at: Date | null
  first_spray_at: Date | null
  last_spray_at: Date | null
  closed_at: Date | null
  poured_total_g: string
}

/** The batch with its present state locked until the transaction ends. */
export async function lockCurrent(id: string, trx: Knex.Transaction): Promise<CurrentBatch | null> {
  const held = await trx('batch_current').where({ batch_id: id }).forUpdate().first<{ batch_id: string } | undefined>('batch_id')
  if (!held) return null
  const row = await trx('batch_current as c')
    .join('batches as b', 'b.id', 'c.batch_id')
    .join('mix_revisions as r', 'r.id', 'b.mix_revision_id')
    .join('mixes as m', 'm.id', 'r.mix_id')
    .where('c.batch_id', id)
    .first<CurrentRow>(
      'c.batch_id', 'b.code', 'c.state', 'm.name as mix_name', 'b.plan_id', 'c.job_id', 'b.job_step_id', 'b.coats', 'c.gun_id', 'c.booth_id',
      'c.mixed_at', 'c.reactive_at', 'c.late_at', 'c.ends_at', 'c.first_spray_at', 'c.last_spray_at', 'c.closed_at', 'c.poured_total_g',
    )
  return {
    id: row.batch_id,
    code: row.code,
    state: row.state,
    mixName: row.mix_name,
    planId: row.plan_id,
    jobId: row.job_id,
    jobStepId: row.job_step_id,
    coats: row.coats,
    gunId: row.gun_id,
    boothId: row.booth_id,
    mixedAt: row.mixed_at.getTime(),
    reactiveAt: msOrNull(row.reactive_at),
    lateAt: msOrNull(row.late_at),
    endsAt: msOrNull(row.ends_at),
    firstSprayAt: msOrNull(row.first_spray_at),
    lastSprayAt: msOrNull(row.last_spray_at),
    closedAt: msOrNull(row.closed_at),
    pouredTotalG: row.poured_total_g,
  }
}

/** What may change of a batch's present state. Instants are epoch milliseconds. */
export interface CurrentChange {
  state?: BatchState
  firstSprayAt?: number
  lastSprayAt?: number | null
  closedAt?: number
  leftoverG?: string | null
  leftoverWeighed?: boolean
  disposal?: string
  used?: 'in-time' | 'late' | 'past-life' | null
}

export async function updateCurrent(id: string, change: CurrentChange, now: number, trx: Knex.Transaction): Promise<void> {
  const columns: Record<string, unknown> = { version: trx.raw('version + 1'), updated_at: toInstant(now) }
  if (change.state !== undefined) columns.state = change.state
  if (change.firstSprayAt !== undefined) columns.first_spray_at = toInstant(change.firstSprayAt)
  if (change.lastSprayAt !== undefined) columns.last_spray_at = toInstantOrNull(change.lastSprayAt)
  if (change.closedAt !== undefined) columns.closed_at = toInstant(change.closedAt)
  if (change.leftoverG !== undefined) columns.leftover_g = change.leftoverG
  if (change.leftoverWeighed !== undefined) columns.leftover_weighed = change.leftoverWeighed
  if (change.disposal !== undefined) columns.disposal = change.disposal
  if (change.used !== undefined) columns.used = change.used
  await trx('batch_current').where({ batch_id: id }).update(columns)
}

/** Everything that a batch is now, by its record, its events and its amendments. Instants are epoch milliseconds. */
export interface EffectiveCurrent extends NewCurrent {
  firstSprayAt: number | null
  lastSprayAt: number | null
  leftoverG: string | null
  leftoverWeighed: boolean | null
  disposal: string | null
  used: 'in-time' | 'late' | 'past-life' | null
  amended: boolean
  /** What the amendments changed beyond these columns, or null where nothing was amended. */
  effective: unknown
}

/** Puts the present state in agreement with the record. Keeps the number of the version going. */
export async function rewriteCurrent(current: EffectiveCurrent, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('batch_current').where({ batch_id: current.batchId }).update({ ...columnsOf(current), version: trx.raw('version + 1'), updated_at: toInstant(now) })
}

const running: readonly string[] = ['fresh', 'closing', 'life-up']

/** True when the present state says what the record says. How far a running pot is, its timers say. */
export async function isCurrent(current: EffectiveCurrent, db: Knex | Knex.Transaction): Promise<boolean> {
  const { state, ...columns } = columnsOf(current)
  const query = db('batch_current').where({ batch_id: current.batchId }).whereIn('state', running.includes(current.state) ? running : [String(state)])
  for (const [column, value] of Object.entries(columns)) void query.whereRaw('?? <=> ?', [column, value as Knex.RawBinding])
  return (await query.first<{ batch_id: string } | undefined>('batch_id')) !== undefined
}

function columnsOf(current: EffectiveCurrent): Record<string, unknown> {
  return {
    state: current.state, booth_id: current.boothId, reactive_at: toInstantOrNull(current.reactiveAt), late_at: toInstantOrNull(current.lateAt),
    ends_at: toInstantOrNull(current.endsAt), first_spray_at: toInstantOrNull(current.firstSprayAt), last_spray_at: toInstantOrNull(current.lastSprayAt),
    closed_at: toInstantOrNull(current.closedAt), leftover_g: current.leftoverG, leftover_weighed: current.leftoverWeighed, disposal: current.disposal,
    used: current.used, job_id: current.jobId, mixed_by_user_id: current.mixedByUserId, gun_id: current.gunId, purpose: current.purpose,
    poured_total_g: current.pouredTotalG, worst_deviation_pct: current.worstDeviationPct, worst_role: current.worstRole,
    out_of_tolerance: current.outOfTolerance, corrected: current.corrected, review_open: current.reviewOpen, amended: current.amended,
    effective: current.effective === null ? null : JSON.stringify(current.effective),
  }
}
