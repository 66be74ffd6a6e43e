import type { Knex } from 'knex'
import type { Batch, BatchComponent, ReviewCode } from '#shared/schemas/batches'
import type { WorkingLine } from '#shared/schemas/common'
import { decimalOf, decimalOrNull, msOrNull } from '../utils/rows'
import type { BatchSnapshot } from './batch-page'
import type { ScaleRecord } from './draft-references'
import type { MixRevision } from './mix-revisions'

type Db = Knex | Knex.Transaction

/** One weighing. `at` is in epoch milliseconds. */
export interface RecordPour {
  index: number
  position: number
  lotId: string
  grams: string
  at: number
  source: BatchComponent['pours'][number]['source']
  round: number
}

export type RecordComponent = Pick<BatchComponent, 'index' | 'role' | 'materialId' | 'targetG' | 'pouredG' | 'deviationPct' | 'verdict'>

/** What happened to a batch, in the order in which it was noted. `at` is in epoch milliseconds. */
interface RecordEvent {
  kind: Batch['events'][number]['kind']
  at: number
  /** When it was written down, epoch milliseconds. */
  notedAt: number
  gunId: string | null
  details: Record<string, unknown>
}

/** A value that was put right. `at` is in epoch milliseconds. */
interface RecordAmendment {
  field: string
  to: string | null
  at: number
  /** True where it put the pot into a booth in which its chemistry must not be sprayed. */
  clashes: boolean
}

/** What the snapshot keeps for reckoning a batch again. */
interface ReckonableSnapshot extends BatchSnapshot {
  mix: MixRevision
  scale: ScaleRecord | null
  approvals: { action: string; subject: string }[]
}

/** All that was ever written of a batch; nothing of it changes. Instants are epoch milliseconds. */
export interface BatchOnRecord {
  id: string
  outcome: 'mixed' | 'stopped'
  jobId: string | null
  purpose: string | null
  boothId: string | null
  gunId: string | null
  mixedByUserId: string
  mixedAt: number
  sealedAt: number
  reactiveAt: number | null
  lateAt: number | null
  endsAt: number | null
  potLife: { basis: NonNullable<Batch['potLife']>['basis']; potLifeMin: string } | null
  pouredTotalG: string
  airC: string | null
  rhPct: string | null
  surfaceC: string | null
  materialC: string | null
  viscosityCup: string | null
  viscositySeconds: string | null
  review: ReviewCode[]
  snapshot: ReckonableSnapshot
  components: RecordComponent[]
  pours: RecordPour[]
  events: RecordEvent[]
  amendments: RecordAmendment[]
}

/** What amendments changed beyond the columns of the present state. */
export interface EffectiveFacts {
  pours: RecordPour[]
  components: RecordComponent[]
  working: WorkingLine[]
  airC: string | null
  rhPct: string | null
  surfaceC: string | null
  materialC: string | null
  viscosityCup: string | null
  viscositySeconds: string | null
  potLife: BatchOnRecord['potLife']
  review: ReviewCode[]
  /** Codes that nobody settled, or that an amended weight opened again. */
  openReview: ReviewCode[]
  note: string | null
}

interface Row {
  id: string
  outcome: BatchOnRecord['outcome']
  job_id: string | null
  purpose: string | null
  booth_id: string | null
  gun_id: string | null
  mixed_by_user_id: string
  mixed_at: Date
  sealed_at: Date
  reactive_at: Date | null
  late_at: Date | null
  ends_at: Date | null
  pot_life_min: string | null
  pot_life_basis: NonNullable<Batch['potLife']>['basis'] | null
  poured_total_g: string
  air_c: string | null
  rh_pct: string | null
  surface_c: string | null
  material_c: string | null
  viscosity_cup: string | null
  viscosity_seconds: string | null
  review: string
  snapshot: string
}

/** Everything on record about one batch. */
export async function readRecord(id: string, db: Db): Promise<BatchOnRecord | null> {
  const row = await db('batches').where({ id }).first<Row | undefined>()
  if (!row) return null
  return {
    ...toHead(row),
    components: await readComponents(id, db),
    pours: await readPours(id, db),
    events: await readEvents(id, db),
    amendments: await readAmendments(id, db),
  }
}

function toHead(row: Row): Omit<BatchOnRecord, 'components' | 'pours' | 'events' | 'amendments'> {
  return {
    id: row.id,
    outcome: row.outcome,
    jobId: row.job_id,
    purpose: row.purpose,
    boothId: row.booth_id,
    gunId: row.gun_id,
    mixedByUserId: row.mixed_by_user_id,
    mixedAt: row.mixed_at.getTime(),
    sealedAt: row.sealed_at.getTime(),
    reactiveAt: msOrNull(row.reactive_at),
    lateAt: msOrNull(row.late_at),
    endsAt: msOrNull(row.ends_at),
    potLife: row.pot_life_basis === null || row.pot_life_min === null ? null : { basis: row.pot_life_basis, potLifeMin: decimalOf(row.pot_life_min) },
    pouredTotalG: decimalOf(row.poured_total_g),
    airC: decimalOrNull(row.air_c),
    rhPct: decimalOrNull(row.rh_pct),
    surfaceC: decimalOrNull(row.surface_c),
    materialC: decimalOrNull(row.material_c),
    viscosityCup: row.viscosity_cup,
    viscositySeconds: decimalOrNull(row.viscosity_seconds),
    review: JSON.parse(row.review) as ReviewCode[],
    snapshot: JSON.parse(row.snapshot) as ReckonableSnapshot,
  }
}

interface ComponentRow {
  component_index: number
  role: RecordComponent['role']
  material_id: string
  target_g: string
  poured_g: string
  deviation_pct: string | null
  verdict: RecordComponent['verdict']
}

async function readComponents(id: string, db: Db): Promise<RecordComponent[]> {
  const rows = await db('batch_components').where({ batch_id: id }).orderBy('component_index').select<ComponentRow[]>()
  return rows.map((row) => ({
    index: row.component_index,
    role: row.role,
    materialId: row.material_id,
    targetG: decimalOf(row.target_g),
    pouredG: decimalOf(row.poured_g),
    deviationPct: decimalOrNull(row.deviation_pct),
    verdict: row.verdict,
  }))
}

interface PourRow {
  component_index: number
  position: number
  lot_id: string
  grams: string
  at: Date
  source: RecordPour['source']
  round: number
}

async function readPours(id: string, db: Db): Promise<RecordPour[]> {
  const rows = await db('batch_pours').where({ batch_id: id }).orderBy(['component_index', 'position']).select<PourRow[]>()
  return rows.map((row) => ({
    index: row.component_index, position: row.position, lotId: row.lot_id, grams: decimalOf(row.grams), at: row.at.getTime(), source: row.source, round: row.round,
  }))
}

async function readEvents(id: string, db: Db): Promise<RecordEvent[]> {
  const rows = await db('batch_events').where({ batch_id: id }).orderBy(['created_at', 'at', 'id'])
    .select<{ kind: RecordEvent['kind']; at: Date; created_at: Date; gun_id: string | null; details: string }[]>('kind', 'at', 'created_at', 'gun_id', 'details')
  return rows.map(({ kind, at, created_at: notedAt, gun_id: gunId, details }) => ({ kind, at: at.getTime(), notedAt: notedAt.getTime(), gunId, details: JSON.parse(details) as Record<string, unknown> }))
}

async function readAmendments(id: string, db: Db): Promise<RecordAmendment[]> {
  const rows = await db('amendments').where({ batch_id: id }).orderBy(['at', 'id'])
    .select<{ field: string; to_value: string | null; at: Date; clash: string | null }[]>('field', 'to_value', 'at', 'clash')
  return rows.map((row) => ({ field: row.field, to: row.to_value, at: row.at.getTime(), clashes: row.clash !== null }))
}

/** Ids of batches in the order of their ids, for a walk over all of them. */
export async function batchIdsAfter(id: string, limit: number, db: Db): Promise<string[]> {
  const rows = await db('batches').where('id', '>', id).orderBy('id').limit(limit).select<{ id: string }[]>('id')
  return rows.map((row) => row.id)
}
