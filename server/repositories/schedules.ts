import type { Knex } from 'knex'
import type { Schedule, ScheduleItem, ScheduleListQuery, ScheduleRevision, ScheduleRevisionLine, ScheduleStep } from '#shared/schemas/schedules'
import { decimalOrNull, isoOf, isoOrNull } from '../utils/rows'
import { whereContains } from './search'

type Db = Knex | Knex.Transaction

/** A step as stored: the mix by its id alone, no film worked out. */
export type StoredStep = Omit<ScheduleStep, 'mix' | 'wetFilmUm' | 'dryFilmUm' | 'filmWorking'> & { mixId: string | null }

export type StoredSchedule = Pick<Schedule, 'id' | 'code' | 'name' | 'archived' | 'version' | 'createdAt' | 'updatedAt'>

interface HeadRow {
  id: string
  code: string
  name: string
  archived_at: Date | null
  version: number
  created_at: Date
  updated_at: Date
}

interface ItemRow extends HeadRow {
  revision_id: string | null
  number: number | null
  state: ScheduleItem['revisionState']
  released_at: Date | null
  steps: string
  coats: string
  open_jobs: string
}

/** The revision in force: the released one, else the latest draft. `s` names the schedule's row. */
const currentSql = `(SELECT c.id FROM schedule_revisions c WHERE c.schedule_id = s.id
  ORDER BY c.state = 'released' DESC, c.number DESC LIMIT 1)`

type Filter = Pick<ScheduleListQuery, 'mixId' | 'q' | 'archived'>

/** Schedules by code, with what the revision in force holds. */
export async function listSchedules(filter: Filter, page: { after: string | null, limit: number }, db: Db): Promise<ScheduleItem[]> {
  const query = db('schedules as s').leftJoin('schedule_revisions as r', 'r.id', db.raw(currentSql))
    .select<ItemRow[]>('s.*', 'r.id as revision_id', 'r.number', 'r.state', 'r.released_at',
      db.raw('(SELECT COUNT(*) FROM schedule_steps t WHERE t.schedule_revision_id = r.id) AS steps'),
      db.raw("(SELECT COUNT(*) FROM schedule_steps t WHERE t.schedule_revision_id = r.id AND t.kind = 'coat') AS coats"),
      db.raw(`(SELECT COUNT(*) FROM jobs j JOIN schedule_revisions o ON o.id = j.schedule_revision_id
        WHERE o.schedule_id = s.id AND j.state IN ('planned', 'running', 'held')) AS open_jobs`))
  if (filter.q) whereContains(query, ['s.code', 's.name'], filter.q)
  if (filter.mixId) {
    void query.whereExists(db('schedule_steps as t').select(db.raw('1')).where('t.mix_id', filter.mixId).whereRaw('t.schedule_revision_id = r.id'))
  }
  if (filter.archived) void query.whereNotNull('s.archived_at')
  else void query.whereNull('s.archived_at')
  if (page.after !== null) void query.where('s.code', '>', page.after)
  const rows = await query.orderBy('s.code').limit(page.limit)
  const codes = await mixCodes(rows.flatMap(row => row.revision_id ?? []), db)
  return rows.map(row => ({
    id: row.id, code: row.code, name: row.name, archived: row.archived_at !== null, version: row.version,
    revisionId: row.revision_id, revisionNumber: row.number, revisionState: row.state, releasedAt: isoOrNull(row.released_at),
    stepCount: Number(row.steps), coatCount: Number(row.coats), openJobCount: Number(row.open_jobs),
    mixCodes: codes.get(row.revision_id ?? '') ?? [],
  }))
}

async function mixCodes(revisionIds: readonly string[], db: Db): Promise<Map<string, string[]>> {
  if (revisionIds.length === 0) return new Map()
  const rows = await db('schedule_steps as t').join('mixes as x', 'x.id', 't.mix_id')
    .whereIn('t.schedule_revision_id', [...revisionIds]).groupBy('t.schedule_revision_id', 'x.code').orderByRaw('MIN(t.position)')
    .select<{ revision: string, code: string }[]>('t.schedule_revision_id as revision', 'x.code')
  const found = new Map<string, string[]>()
  for (const row of rows) found.set(row.revision, [...found.get(row.revision) ?? [], row.code])
  return found
}

export async function findSchedule(id: string, db: Db): Promise<StoredSchedule | null> {
  const row = await db('schedules').where({ id }).first<HeadRow | undefined>()
  if (!row) return null
  return {
    id: row.id, code: row.code, name: row.name, archived: row.archived_at !== null, version: row.version,
    createdAt: isoOf(row.created_at), updatedAt: isoOf(row.updated_at),
  }
}

interface RevisionRow {
  id: string
  number: number
  state: ScheduleRevision['state']
  notes: string | null
  released_at: Date | null
  released_by_name: string | null
  jobs: string
}

/** All revisions of a schedule, the newest first, with how many jobs run by each. */
export async function listScheduleRevisions(scheduleId: string, db: Db): Promise<ScheduleRevisionLine[]> {
  const rows = await db('schedule_revisions as r').leftJoin('users as u', 'u.id', 'r.released_by_user_id')
    .where('r.schedule_id', scheduleId).orderBy('r.number', 'desc')
    .select<RevisionRow[]>('r.id', 'r.number', 'r.state', 'r.notes', 'r.released_at', 'u.name as released_by_name',
      db.raw('(SELECT COUNT(*) FROM jobs j WHERE j.schedule_revision_id = r.id) AS jobs'))
  return rows.map(row => ({
    id: row.id, number: row.number, state: row.state, notes: row.notes, releasedAt: isoOrNull(row.released_at),
    releasedByName: row.released_by_name, jobCount: Number(row.jobs),
  }))
}

interface StepRow {
  id: string
  position: number
  kind: ScheduleStep['kind']
  title: string
  grit: string | null
  mix_id: string | null
  film_weight_min_gsm: string | null
  film_weight_gsm: string | null
  film_weight_max_gsm: string | null
  film_weight_is: ScheduleStep['filmWeightIs']
  coats: number | null
  passes: number | null
  faces: ScheduleStep['faces']
  gun_shape: ScheduleStep['gunShape']
  max_pressure_bar: string | null
  coat_interval_min_min: string | null
  coat_interval_max_min: string | null
  overcoat_from_min: string | null
  overcoat_until_min: string | null
  sand_from_min: string | null
  sand_until_min: string | null
  flash_off_min: string | null
  dry_min: string | null
  dry_place: string | null
  dry_at_c: string | null
  lay_flat: number
  do_not_sand: number
  keep_from_draughts: number
  cautions: string | null
  instructions: string | null
}

/** The steps of a revision in their order. */
export async function listSteps(revisionId: string, db: Db): Promise<StoredStep[]> {
  const rows = await db('schedule_steps').where('schedule_revision_id', revisionId).orderBy('position').select<StepRow[]>('*')
  return rows.map(toStep)
}

const toStep = (row: StepRow): StoredStep => ({
  id: row.id,
  position: row.position,
  kind: row.kind,
  title: row.title,
  grit: row.grit,
  mixId: row.mix_id,
  filmWeightMinGsm: decimalOrNull(row.film_weight_min_gsm),
  filmWeightGsm: decimalOrNull(row.film_weight_gsm),
  filmWeightMaxGsm: decimalOrNull(row.film_weight_max_gsm),
  filmWeightIs: row.film_weight_is,
  coats: row.coats,
  passes: row.passes,
  faces: row.faces,
  gunShape: row.gun_shape,
  maxPressureBar: decimalOrNull(row.max_pressure_bar),
  coatIntervalMinMin: decimalOrNull(row.coat_interval_min_min),
  coatIntervalMaxMin: decimalOrNull(row.coat_interval_max_min),
  overcoatFromMin: decimalOrNull(row.overcoat_from_min),
  overcoatUntilMin: decimalOrNull(row.overcoat_until_min),
  sandFromMin: decimalOrNull(row.sand_from_min),
  sandUntilMin: decimalOrNull(row.sand_until_min),
  flashOffMin: decimalOrNull(row.flash_off_min),
  dryMin: decimalOrNull(row.dry_min),
  dryPlace: row.dry_place,
  dryAtC: decimalOrNull(row.dry_at_c),
  layFlat: row.lay_flat === 1,
  doNotSand: row.do_not_sand === 1,
  keepFromDraughts: row.keep_from_draughts === 1,
  cautions: row.cautions,
  instructions: row.instructions,
})

/** Mixes of these ids with their current revision, for the steps that spray them. */
export async function listStepMixes(mixIds: readonly string[], db: Db): Promise<{ id: string, code: string, name: string, revisionId: string | null }[]> {
  if (mixIds.length === 0) return []
  return await db('mixes').whereIn('id', [...mixIds]).select('id', 'code', 'name', 'current_revision_id as revisionId')
}

/** Jobs that run by a revision, the open ones first. */
export async function jobsOfRevision(revisionId: string, limit: number, db: Db): Promise<Schedule['jobs']> {
  return await db('jobs').where('schedule_revision_id', revisionId)
    .orderByRaw("FIELD(state, 'running', 'held', 'planned', 'done'), code").limit(limit).select('id', 'code', 'title', 'state')
}
