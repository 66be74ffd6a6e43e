import type { Knex } from 'knex'
import type { LivePot } from '#shared/schemas/live'
import { D, sum } from '#shared/engine/decimal'
import { minutesToMs, toIso } from '#shared/utils/instant'
import { gunSprays } from '#shared/utils/pot-sprays'
import { decimalOf, decimalOrNull, isoOf, isoOrNull, toInstant } from '../utils/rows'
import { listSprays, type SprayEvent } from './sprays'

type Db = Knex | Knex.Transaction

/** What sealed batches and drafts have in common once they are read. */
interface CommonRow {
  id: string
  code: string
  booth_id: string | null
  booth_name: string | null
  gun_id: string | null
  gun_name: string | null
  mix_name: string
  mix_code: string
  job_id: string | null
  job_code: string | null
  job_title: string | null
  step_title: string | null
  pot_number: number
  pot_count: number
  mixed_by_name: string
  reactive_at: Date | null
  chemistry: string | null
  isocyanates: number | string | null
  timer_id: string | null
  timer_state: string | null
  timer_due_at: Date | null
  silenced_until: Date | null
  silenced_by: string | null
}

interface SealedRow extends CommonRow {
  purpose: string | null
  state: LivePot['state']
  mixed_at: Date
  late_at: Date | null
  ends_at: Date | null
  induction_min: string
  poured_total_g: string
  leftover_g: string | null
  first_spray_at: Date | null
  last_spray_at: Date | null
}

interface DraftRow extends CommonRow {
  draft_state: 'open' | 'sealed' | 'stopped' | 'discarded'
  body: string
  created_at: Date
  late_due_at: Date | null
  late_state: string | null
  reactive_parts: number | string
}

/** Pots of one batch, of one booth (those of no booth and those anywhere whose life is up included), or all. */
export interface PotFilter {
  batchId?: string
  boothId?: string | null
  /** Only what still matters to a booth at this instant, epoch milliseconds. */
  liveAt?: number
  /** The one batch was sealed in this transaction: no gun has done anything with it yet. */
  fresh?: boolean
}

/** A pot without pot life, and a draft without hardener, leave the screens a day after they were begun. */
const dayMs = 86_400_000

/** @param mixer column of the one who mixed it */
function names(query: Knex.QueryBuilder, alias: 'b' | 'd', mixer: string, db: Db): Knex.QueryBuilder {
  const ofRevision = (column: string, filter: string) =>
    `(SELECT ${column} FROM mix_components mc JOIN materials ma ON ma.id = mc.material_id WHERE mc.mix_revision_id = ${alias}.mix_revision_id ${filter})`
  return query
    .join('mix_revisions as r', 'r.id', `${alias}.mix_revision_id`)
    .join('mixes as m', 'm.id', 'r.mix_id')
    .join('users as u', 'u.id', mixer)
    .leftJoin('job_steps as js', 'js.id', `${alias}.job_step_id`)
    .leftJoin('schedule_steps as ss', 'ss.id', 'js.schedule_step_id')
    .leftJoin('jobs as j', 'j.id', 'js.job_id')
    .leftJoin('timers as t', (on) => void on.on('t.subject_id', `${alias}.id`).andOnVal('t.subject_type', 'batch').andOnVal('t.kind', 'pot-up'))
    .select(
      `${alias}.id`, `${alias}.code`, `${alias}.pot_number`, `${alias}.pot_count`, 'm.name as mix_name', 'm.code as mix_code',
      'u.name as mixed_by_name', 'j.id as job_id', 'j.code as job_code', 'j.title as job_title', 'ss.title as step_title',
      't.id as timer_id', 't.state as timer_state', 't.due_at as timer_due_at', 't.silenced_until', 't.silenced_by',
      db.raw(`${ofRevision('ma.chemistry', 'ORDER BY mc.role = \'base\' DESC, mc.position LIMIT 1')} AS chemistry`),
      db.raw(`${ofRevision('MAX(ma.contains_isocyanates)', '')} AS isocyanates`),
    )
}

/** The gun that was loaded last from this pot, else the one that was planned; an amendment of the gun stands over both. */
const gunOf = (alias: 'b' | 'd') =>
  `COALESCE((SELECT e.gun_id FROM batch_events e WHERE e.batch_id = ${alias}.id AND e.gun_id IS NOT NULL AND e.kind = 'first-spray' ORDER BY e.at DESC, e.created_at DESC, e.id DESC LIMIT 1), ${alias}.gun_id)`

async function sealedPots(filter: PotFilter, db: Db): Promise<LivePot[]> {
  const query = names(db('batches as b').join('batch_current as c', 'c.batch_id', 'b.id'), 'b', 'c.mixed_by_user_id', db)
    .leftJoin('booths as bo', 'bo.id', 'c.booth_id')
    .leftJoin('guns as g', 'g.id', db.raw(`IF(c.gun_id <=> b.gun_id, ${gunOf('b')}, c.gun_id)`))
    .select(
      'c.purpose', 'c.booth_id', 'bo.name as booth_name', 'g.id as gun_id', 'g.name as gun_name', 'c.state', 'c.mixed_at',
      'c.reactive_at', 'c.late_at', 'c.ends_at', 'r.induction_min', 'c.poured_total_g', 'c.leftover_g', 'c.first_spray_at', 'c.last_spray_at',
    )
  const { batchId, boothId, liveAt } = filter
  if (batchId) void query.where('b.id', batchId)
  if (boothId) void query.where((part) => part.where('c.booth_id', boothId).orWhereNull('c.booth_id').orWhere('c.state', 'life-up'))
  if (liveAt !== undefined) {
    void query.where((part) =>
      part
        .whereIn('c.state', ['fresh', 'closing', 'life-up'])
        .orWhere((plain) => plain.where('c.state', 'no-pot-life').whereNull('c.closed_at').where('c.mixed_at', '>', toInstant(liveAt - dayMs))),
    )
  }
  const rows = (await query) as SealedRow[]
  const shots = filter.fresh ? [] : await listSprays(rows.map(({ id }) => id), db)
  return rows.map((row) => toSealedPot(row, shots.filter((shot) => shot.batchId === row.id)))
}

async function draftPots(filter: PotFilter, db: Db): Promise<LivePot[]> {
  const query = names(db('batch_drafts as d'), 'd', 'd.mixed_by_user_id', db)
    .leftJoin('booths as bo', 'bo.id', 'd.booth_id')
    .leftJoin('guns as g', 'g.id', db.raw(gunOf('d')))
    .leftJoin('timers as l', (on) => void on.on('l.subject_id', 'd.id').andOnVal('l.subject_type', 'batch').andOnVal('l.kind', 'pot-late'))
    .select(
      'd.state as draft_state', 'd.body', 'd.created_at', 'd.reactive_at', 'd.booth_id', 'bo.name as booth_name', 'g.id as gun_id', 'g.name as gun_name',
      'l.due_at as late_due_at', 'l.state as late_state',
      db.raw('(SELECT COUNT(*) FROM mix_components mc WHERE mc.mix_revision_id = d.mix_revision_id AND mc.reactive = 1) AS reactive_parts'),
    )
  const { batchId, boothId, liveAt } = filter
  if (batchId) void query.where('d.id', batchId)
  if (boothId) void query.where((part) => part.where('d.booth_id', boothId).orWhereNull('d.booth_id').orWhereIn('t.state', ['fired', 'acknowledged']))
  if (liveAt !== undefined) {
    void query.where('d.state', 'open').where((part) => part.whereNotNull('d.reactive_at').orWhere('d.updated_at', '>', toInstant(liveAt - dayMs)))
  }
  const rows = (await query) as DraftRow[]
  return rows.map(toDraftPot)
}

function common(row: CommonRow, state: LivePot['state']) {
  const rings = state === 'life-up' && (row.timer_state === 'fired' || row.timer_state === 'acknowledged')
  const silencedUntil = rings ? isoOrNull(row.silenced_until) : null
  return {
    id: row.id,
    code: row.code,
    state,
    boothId: row.booth_id,
    boothName: row.booth_name,
    gunId: row.gun_id,
    gunName: row.gun_name,
    mixName: row.mix_name,
    mixCode: row.mix_code,
    jobId: row.job_id,
    jobCode: row.job_code,
    jobTitle: row.job_title,
    stepTitle: row.step_title,
    potNumber: row.pot_number,
    potCount: row.pot_count,
    mixedByName: row.mixed_by_name,
    reactiveAt: isoOrNull(row.reactive_at),
    containsIsocyanates: Number(row.isocyanates ?? 0) === 1,
    chemistry: row.chemistry ?? 'unknown',
    silencedUntil,
    silencedBy: silencedUntil === null ? null : row.silenced_by,
    alarm: !rings ? 'none' : silencedUntil === null ? 'sounding' : 'silenced',
    alarmTimerId: rings ? row.timer_id : null,
  } satisfies Partial<LivePot>
}

const instantOrNull = (ms: number | null) => (ms === null ? null : toIso(ms))

/** What each gun did with the pot, as it was tapped. */
function gunsOf(shots: readonly SprayEvent[]): LivePot['guns'] {
  return gunSprays(shots).map(({ gunId, gunName, ...gun }) => ({
    gunId, gunName, firstSprayAt: instantOrNull(gun.firstAt), lastSprayAt: instantOrNull(gun.lastAt), flushedAt: instantOrNull(gun.flushedAt),
  }))
}

/** When a pot has stood as long as its sheet asks; null where it asks for nothing. */
export function standsUntil(mixedAt: number, inductionMin: string): number | null {
  const ms = minutesToMs(inductionMin, 'up')
  return ms === 0 ? null : mixedAt + ms
}

function toSealedPot(row: SealedRow, shots: readonly SprayEvent[]): LivePot {
  return {
    ...common(row, row.state),
    stage: 'sealed',
    purpose: row.purpose,
    pouredG: decimalOf(row.poured_total_g),
    mixedAt: isoOf(row.mixed_at),
    lateAt: isoOrNull(row.late_at),
    endsAt: isoOrNull(row.ends_at),
    standsUntil: instantOrNull(standsUntil(row.mixed_at.getTime(), row.induction_min)),
    firstSprayAt: isoOrNull(row.first_spray_at),
    lastSprayAt: isoOrNull(row.last_spray_at),
    guns: gunsOf(shots),
    leftoverG: decimalOrNull(row.leftover_g),
  }
}

/** The part of a draft's body that a screen shows. */
interface DraftFacts {
  purpose?: string | null
  components?: { pours: { grams: string }[] }[]
}

function toDraftPot(row: DraftRow): LivePot {
  const facts = JSON.parse(row.body) as DraftFacts
  const grams = (facts.components ?? []).flatMap(({ pours }) => pours.map((pour) => new D(pour.grams)))
  return {
    ...common(row, draftState(row)),
    stage: 'mixing',
    purpose: facts.purpose ?? null,
    pouredG: sum(grams).toString(),
    mixedAt: isoOf(row.created_at),
    lateAt: row.reactive_at ? isoOrNull(row.late_due_at) : null,
    endsAt: row.reactive_at ? isoOrNull(row.timer_due_at) : null,
    standsUntil: null,
    firstSprayAt: null,
    lastSprayAt: null,
    guns: [],
    leftoverG: null,
  }
}

/** A draft has no state of its own yet: what its timers have done tells it. */
function draftState(row: DraftRow): LivePot['state'] {
  if (row.draft_state === 'stopped' || row.draft_state === 'discarded') return 'stopped'
  if (Number(row.reactive_parts) === 0) return 'no-pot-life'
  const happened = (state: string | null) => state === 'fired' || state === 'acknowledged'
  if (happened(row.timer_state)) return 'life-up'
  return happened(row.late_state) ? 'closing' : 'fresh'
}

/** Pots being mixed and pots sealed; a sealed one stands for its draft. The soonest to end comes first. */
export async function findPots(filter: PotFilter, db: Db): Promise<LivePot[]> {
  const sealed = await sealedPots(filter, db)
  if (filter.batchId !== undefined && sealed.length > 0) return sealed
  const known = new Set(sealed.map(({ id }) => id))
  const drafts = (await draftPots(filter, db)).filter(({ id }) => !known.has(id))
  const end = (pot: LivePot) => (pot.endsAt === null ? Number.POSITIVE_INFINITY : Date.parse(pot.endsAt))
  return [...sealed, ...drafts].sort((a, b) => compare(end(a), end(b)) || compare(a.code, b.code))
}

const compare = <T extends number | string>(a: T, b: T): number => (a < b ? -1 : a > b ? 1 : 0)
