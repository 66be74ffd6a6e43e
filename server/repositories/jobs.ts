import type { Knex } from 'knex'
import type { Job, JobBatch, JobItem, JobListQuery, JobPiece, JobStep } from '#shared/schemas/jobs'
import type { Faces } from '#shared/schemas/schedules'
import { decimalOf, decimalOrNull, isoOf, msOrNull, toInstant } from '../utils/rows'
import { whereContains } from './search'

type Db = Knex | Knex.Transaction

/** A job as stored; how far off its day is depends on today. */
export type StoredJob = Omit<JobItem, 'dueInDays'> & Pick<Job, 'notes' | 'createdAt' | 'updatedAt'>

export type StoredPiece = Omit<JobPiece, 'areaWorking' | 'stepStates'>

export type StoredJobStep = Omit<JobStep, 'step' | 'donePieceCount'> & { scheduleStepId: string }

/** Where the page before ended: the due day (those without one come last) and the code. */
export interface JobKey {
  on: string
  code: string
}

interface JobRow {
  id: string
  code: string
  title: string
  customer: string | null
  state: Job['state']
  due_on: string | null
  notes: string | null
  version: number
  created_at: Date
  updated_at: Date
  schedule_id: string
  schedule_code: string
  schedule_name: string
  schedule_revision_id: string
  schedule_revision_number: number
  steps: string
  done_steps: string
  started_steps: string
  pieces: string
  area_m2: string
}

const dueSql = "COALESCE(j.due_on, '9999-12-31')"

const select = (db: Db) => db('jobs as j')
  .join('schedule_revisions as r', 'r.id', 'j.schedule_revision_id')
  .join('schedules as s', 's.id', 'r.schedule_id')
  .select<JobRow[]>('j.*', 's.id as schedule_id', 's.code as schedule_code', 's.name as schedule_name', 'r.number as schedule_revision_number',
    db.raw('(SELECT COUNT(*) FROM job_steps t WHERE t.job_id = j.id) AS steps'),
    db.raw("(SELECT COUNT(*) FROM job_steps t WHERE t.job_id = j.id AND t.state = 'done') AS done_steps"),
    db.raw("(SELECT COUNT(*) FROM job_steps t WHERE t.job_id = j.id AND t.state = 'started') AS started_steps"),
    db.raw('(SELECT COALESCE(SUM(p.quantity), 0) FROM pieces p WHERE p.job_id = j.id) AS pieces'),
    db.raw('(SELECT COALESCE(SUM(p.area_m2), 0) FROM pieces p WHERE p.job_id = j.id) AS area_m2'))

const toJob = (row: JobRow): StoredJob => ({
  id: row.id,
  code: row.code,
  title: row.title,
  customer: row.customer,
  state: row.state,
  dueOn: row.due_on,
  notes: row.notes,
  scheduleId: row.schedule_id,
  scheduleCode: row.schedule_code,
  scheduleName: row.schedule_name,
  scheduleRevisionId: row.schedule_revision_id,
  scheduleRevisionNumber: row.schedule_revision_number,
  stepCount: Number(row.steps),
  doneStepCount: Number(row.done_steps),
  startedStepCount: Number(row.started_steps),
  pieceCount: Number(row.pieces),
  areaM2: decimalOf(row.area_m2),
  version: row.version,
  createdAt: isoOf(row.created_at),
  updatedAt: isoOf(row.updated_at),
})

/** Jobs, the one due first first; done ones the other way round, since the last ones are asked for most. */
export async function listJobs(
  filter: Pick<JobListQuery, 'state' | 'q'>, page: { after: JobKey | null, limit: number }, db: Db,
): Promise<StoredJob[]> {
  const query = select(db)
  if (filter.state === 'open') void query.whereNot('j.state', 'done')
  else if (filter.state && filter.state !== 'all') void query.where('j.state', filter.state)
  if (filter.q) whereContains(query, ['j.code', 'j.title', 'j.customer'], filter.q)
  const [past, turn] = filter.state === 'done' ? ['<', 'DESC'] : ['>', 'ASC']
  if (page.after) void query.whereRaw(`(${dueSql}, j.code) ${past} (?, ?)`, [page.after.on, page.after.code])
  return (await query.orderByRaw(`${dueSql} ${turn}, j.code ${turn}`).limit(page.limit)).map(toJob)
}

export async function findJob(id: string, db: Db): Promise<StoredJob | null> {
  const [row] = await select(db).where('j.id', id)
  return row ? toJob(row) : null
}

interface PieceRow {
  id: string
  position: number
  label: string
  length_mm: string
  width_mm: string
  thickness_mm: string | null
  quantity: number
  faces: Faces
  area_m2: string
  rack: string | null
  held_reason: string | null
}

/** The cut list in its order. */
export async function listPieces(jobId: string, db: Db): Promise<StoredPiece[]> {
  const rows = await db('pieces').where('job_id', jobId).orderBy('position').select<PieceRow[]>('*')
  return rows.map(row => ({
    id: row.id, position: row.position, label: row.label, lengthMm: decimalOf(row.length_mm), widthMm: decimalOf(row.width_mm),
    thicknessMm: decimalOrNull(row.thickness_mm), quantity: row.quantity, faces: row.faces, areaM2: decimalOf(row.area_m2),
    rack: row.rack, heldReason: row.held_reason,
  }))
}

interface StepRow {
  id: string
  schedule_step_id: string
  position: number
  state: JobStep['state']
  booth_id: string | null
  booth_name: string | null
  gun_id: string | null
  gun_name: string | null
  bench_list_on: string | null
  version: number
}

/** The steps of a job in their order, without who did them last. */
export async function listJobSteps(jobId: string, db: Db): Promise<Omit<StoredJobStep, 'lastAt' | 'lastByName' | 'lastBoothName'>[]> {
  const rows = await db('job_steps as t').leftJoin('booths as b', 'b.id', 't.booth_id').leftJoin('guns as g', 'g.id', 't.gun_id')
    .where('t.job_id', jobId).orderBy('t.position')
    .select<StepRow[]>('t.*', 'b.name as booth_name', 'g.name as gun_name')
  return rows.map(row => ({
    id: row.id, scheduleStepId: row.schedule_step_id, position: row.position, state: row.state, boothId: row.booth_id, boothName: row.booth_name,
    gunId: row.gun_id, gunName: row.gun_name, benchListOn: row.bench_list_on, version: row.version,
  }))
}

/** What was done to pieces of a job, once. Instants in epoch milliseconds. */
export interface JobApplication {
  id: string
  jobStepId: string
  kind: 'prepare' | 'coat' | 'sand' | 'inspect'
  coatNumber: number | null
  face: Faces | null
  firstAt: number
  lastAt: number
  opensAt: number | null
  closingAt: number | null
  closesAt: number | null
  userName: string | null
  boothName: string | null
  pieceIds: string[]
}

interface ApplicationRow {
  id: string
  job_step_id: string
  kind: JobApplication['kind']
  coat_number: number | null
  face: Faces | null
  first_at: Date
  last_at: Date
  opens_at: Date | null
  closing_at: Date | null
  closes_at: Date | null
  user_name: string | null
  booth_name: string | null
}

/** All applications of a job in the order of time, with the pieces that each reached. */
export async function listApplications(jobId: string, db: Db): Promise<JobApplication[]> {
  const rows = await db('applications as a').join('application_current as n', 'n.application_id', 'a.id')
    .leftJoin('users as u', 'u.id', 'a.user_id').leftJoin('booths as b', 'b.id', 'n.booth_id')
    .where('a.job_id', jobId).orderBy(['n.first_at', 'a.id'])
    .select<ApplicationRow[]>('a.id', 'a.job_step_id', 'a.kind', 'a.coat_number', 'a.face', 'n.first_at', 'n.last_at', 'n.opens_at', 'n.closing_at',
      'n.closes_at', 'u.name as user_name', 'b.name as booth_name')
  const links = await db('application_pieces as l').join('applications as a', 'a.id', 'l.application_id').where('a.job_id', jobId)
    .select<{ application_id: string, piece_id: string }[]>('l.application_id', 'l.piece_id')
  const pieces = new Map<string, string[]>()
  for (const link of links) pieces.set(link.application_id, [...pieces.get(link.application_id) ?? [], link.piece_id])
  return rows.map(row => ({
    id: row.id, jobStepId: row.job_step_id, kind: row.kind, coatNumber: row.coat_number, face: row.face,
    firstAt: row.first_at.getTime(), lastAt: row.last_at.getTime(),
    opensAt: msOrNull(row.opens_at), closingAt: msOrNull(row.closing_at), closesAt: msOrNull(row.closes_at),
    userName: row.user_name, boothName: row.booth_name, pieceIds: pieces.get(row.id) ?? [],
  }))
}

export async function countJobBatches(jobId: string, db: Db): Promise<number> {
  const row = await db('batches').where('job_id', jobId).count({ total: '*' }).first<{ total: string }>()
  return Number(row.total)
}

interface BatchRow {
  id: string
  code: string
  job_step_id: string | null
  mixed_at: Date
  poured_total_g: string
  state: JobBatch['state']
  mixed_by_name: string
}

/** The latest batches of a job, newest first. */
export async function listJobBatches(jobId: string, limit: number, db: Db): Promise<JobBatch[]> {
  const rows = await db('batches as b').join('batch_current as c', 'c.batch_id', 'b.id').join('users as u', 'u.id', 'c.mixed_by_user_id')
    .where('b.job_id', jobId).orderBy([{ column: 'b.mixed_at', order: 'desc' }, { column: 'b.id', order: 'desc' }]).limit(limit)
    .select<BatchRow[]>('b.id', 'b.code', 'b.job_step_id', 'b.mixed_at', 'c.poured_total_g', 'c.state', 'u.name as mixed_by_name')
  return rows.map(row => ({
    id: row.id, code: row.code, jobStepId: row.job_step_id, mixedAt: isoOf(row.mixed_at), pouredTotalG: decimalOf(row.poured_total_g),
    state: row.state, mixedByName: row.mixed_by_name,
  }))
}

/** A planned job runs from its first coat on. */
export async function startJob(id: string, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('jobs').where({ id, state: 'planned' }).update({ state: 'running', updated_at: toInstant(now), version: trx.raw('version + 1') })
}
