import type { Knex } from 'knex'
import type { BenchStep } from '#shared/schemas/bench'
import { decimalOf, decimalOrNull } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A step of a job that runs or is held, as the readiness rules look at it. */
export interface StepFacts {
  id: string
  jobId: string
  jobCode: string
  jobTitle: string
  jobHeld: boolean
  position: number
  kind: 'prepare' | 'coat' | 'sand' | 'wait' | 'inspect'
  title: string
  state: 'to-come' | 'started' | 'done'
  mixId: string | null
  mixRevisionId: string | null
  filmWeightGsm: string | null
  filmWeightIs: BenchStep['filmWeightIs']
  coats: number
  gunShape: BenchStep['gunShape']
  boothId: string | null
  gunId: string | null
}

interface StepRow {
  id: string
  job_id: string
  job_code: string
  job_title: string
  job_state: string
  position: number
  kind: StepFacts['kind']
  title: string
  state: StepFacts['state']
  mix_id: string | null
  current_revision_id: string | null
  film_weight_gsm: string | null
  film_weight_is: BenchStep['filmWeightIs']
  coats: number | null
  gun_shape: BenchStep['gunShape'] | null
  booth_id: string | null
  gun_id: string | null
}

/**
 * All steps of jobs that run or are held, and of planned ones that somebody has put on a bench's list for this day or
 * before. The job due first comes first.
 */
export async function listStepFacts(today: string, db: Db): Promise<StepFacts[]> {
  const listed = db('job_steps as l').select(db.raw('1')).whereRaw('l.job_id = j.id').where('l.bench_list_on', '<=', today)
  const rows = await db('job_steps as t')
    .join('jobs as j', 'j.id', 't.job_id')
    .join('schedule_steps as s', 's.id', 't.schedule_step_id')
    .leftJoin('mixes as x', 'x.id', 's.mix_id')
    .where((part) => part.whereIn('j.state', ['running', 'held']).orWhere((planned) => planned.where('j.state', 'planned').whereExists(listed)))
    .orderByRaw('COALESCE(j.due_on, \'9999-12-31\'), j.code, t.position')
    .select<StepRow[]>(
      't.id', 't.job_id', 'j.code as job_code', 'j.title as job_title', 'j.state as job_state', 't.position', 's.kind', 's.title', 't.state',
      's.mix_id', 'x.current_revision_id', 's.film_weight_gsm', 's.film_weight_is', 's.coats', 's.gun_shape', 't.booth_id', 't.gun_id',
    )
  return rows.map((row) => ({
    id: row.id,
    jobId: row.job_id,
    jobCode: row.job_code,
    jobTitle: row.job_title,
    jobHeld: row.job_state === 'held',
    position: row.position,
    kind: row.kind,
    title: row.title,
    state: row.state,
    mixId: row.mix_id,
    mixRevisionId: row.current_revision_id,
    filmWeightGsm: decimalOrNull(row.film_weight_gsm),
    filmWeightIs: row.film_weight_is,
    coats: row.coats ?? 1,
    gunShape: row.gun_shape ?? 'flat',
    boothId: row.booth_id,
    gunId: row.gun_id,
  }))
}

/** A piece of one of these jobs. */
export interface PieceFacts {
  id: string
  jobId: string
  label: string
  areaM2: string
  quantity: number
  faces: BenchStep['pieces'][number]['faces']
  rack: string | null
  heldReason: string | null
}

interface PieceRow {
  id: string
  job_id: string
  label: string
  area_m2: string
  quantity: number
  faces: PieceFacts['faces']
  rack: string | null
  held_reason: string | null
}

/** The pieces of these jobs in the order of their lists. */
export async function listPieceFacts(jobIds: readonly string[], db: Db): Promise<PieceFacts[]> {
  if (jobIds.length === 0) return []
  const rows = await db('pieces').whereIn('job_id', jobIds).orderBy(['job_id', 'position']).select<PieceRow[]>('*')
  return rows.map((row) => ({
    id: row.id, jobId: row.job_id, label: row.label, areaM2: decimalOf(row.area_m2), quantity: row.quantity, faces: row.faces,
    rack: row.rack, heldReason: row.held_reason,
  }))
}

/** How many coats of one step a piece has got, or how often it was done, and when last (epoch milliseconds). */
export interface Treatment {
  jobStepId: string
  pieceId: string
  times: number
  lastAt: number
}

interface TreatmentRow {
  job_step_id: string
  piece_id: string
  times: string
  last_at: Date
}

/**
 * What was done to the pieces of these jobs. A coat on several faces is several applications, and one application may
 * be several coats: the highest coat number counts, where it was noted.
 */
export async function listTreatments(jobIds: readonly string[], db: Db): Promise<Treatment[]> {
  if (jobIds.length === 0) return []
  const rows = await db('applications as a')
    .join('application_current as n', 'n.application_id', 'a.id')
    .join('application_pieces as p', 'p.application_id', 'a.id')
    .whereIn('a.job_id', jobIds)
    .groupBy(['a.job_step_id', 'p.piece_id'])
    .select<TreatmentRow[]>('a.job_step_id', 'p.piece_id', db.raw('COALESCE(MAX(a.coat_number), COUNT(*)) AS times'), db.raw('MAX(n.last_at) AS last_at'))
  return rows.map((row) => ({ jobStepId: row.job_step_id, pieceId: row.piece_id, times: Number(row.times), lastAt: row.last_at.getTime() }))
}
