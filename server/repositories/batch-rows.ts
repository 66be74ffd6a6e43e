import type { Knex } from 'knex'
import type { BatchListItem } from '#shared/schemas/batches'
import { decimalOf, decimalOrNull, isoOf, isoOrNull } from '../utils/rows'

/** What the list and the page of a batch read alike. */
export interface NamedRow {
  id: string
  code: string
  outcome: BatchListItem['outcome']
  state: BatchListItem['state']
  pot_number: number
  pot_count: number
  mix_code: string
  mix_name: string
  mix_revision_number: number
  job_id: string | null
  job_code: string | null
  job_title: string | null
  step_title: string | null
  purpose: string | null
  booth_id: string | null
  booth_name: string | null
  gun_id: string | null
  gun_name: string | null
  mixed_by_user_id: string
  mixed_by_name: string
  mixed_by_initials: string
  mixed_at: Date
  sealed_at: Date
  target_total_g: string
  poured_total_g: string
  reactive_at: Date | null
  late_at: Date | null
  ends_at: Date | null
  first_spray_at: Date | null
  last_spray_at: Date | null
  closed_at: Date | null
  leftover_g: string | null
  leftover_weighed: number | null
  disposal: string | null
  used: BatchListItem['used']
  worst_deviation_pct: string | null
  out_of_tolerance: number
  corrected: number
  review_open: number
  amended: number
}

/** Joins everything that has a name to `batches as b` and `batch_current as c`, and selects the shared columns. */
export function selectNamed(query: Knex.QueryBuilder): Knex.QueryBuilder {
  return query
    .join('mix_revisions as r', 'r.id', 'b.mix_revision_id')
    .join('mixes as m', 'm.id', 'r.mix_id')
    .join('users as u', 'u.id', 'c.mixed_by_user_id')
    .leftJoin('jobs as j', 'j.id', 'c.job_id')
    .leftJoin('job_steps as s', 's.id', 'b.job_step_id')
    .leftJoin('schedule_steps as t', 't.id', 's.schedule_step_id')
    .leftJoin('booths as o', 'o.id', 'c.booth_id')
    .leftJoin('guns as g', 'g.id', 'c.gun_id')
    .select(
      'b.id', 'b.code', 'b.outcome', 'c.state', 'b.pot_number', 'b.pot_count', 'm.code as mix_code', 'm.name as mix_name',
      'r.number as mix_revision_number', 'c.job_id', 'j.code as job_code', 'j.title as job_title', 't.title as step_title', 'c.purpose',
      'c.booth_id', 'o.name as booth_name', 'c.gun_id', 'g.name as gun_name', 'c.mixed_by_user_id', 'u.name as mixed_by_name',
      'u.initials as mixed_by_initials', 'c.mixed_at', 'b.sealed_at', 'b.target_total_g', 'c.poured_total_g', 'c.reactive_at', 'c.late_at',
      'c.ends_at', 'c.first_spray_at', 'c.last_spray_at', 'c.closed_at', 'c.leftover_g', 'c.leftover_weighed', 'c.disposal', 'c.used',
      'c.worst_deviation_pct', 'c.out_of_tolerance', 'c.corrected', 'c.review_open', 'c.amended',
    )
}

export function toNamed(row: NamedRow): Omit<BatchListItem, 'baseCode' | 'worstRole'> {
  return {
    id: row.id,
    code: row.code,
    outcome: row.outcome,
    state: row.state,
    potNumber: row.pot_number,
    potCount: row.pot_count,
    mixCode: row.mix_code,
    mixName: row.mix_name,
    mixRevisionNumber: row.mix_revision_number,
    jobId: row.job_id,
    jobCode: row.job_code,
    jobTitle: row.job_title,
    stepTitle: row.step_title,
    purpose: row.purpose,
    boothId: row.booth_id,
    boothName: row.booth_name,
    gunId: row.gun_id,
    gunName: row.gun_name,
    mixedByUserId: row.mixed_by_user_id,
    mixedByName: row.mixed_by_name,
    mixedByInitials: row.mixed_by_initials,
    mixedAt: isoOf(row.mixed_at),
    sealedAt: isoOf(row.sealed_at),
    targetTotalG: decimalOf(row.target_total_g),
    pouredTotalG: decimalOf(row.poured_total_g),
    reactiveAt: isoOrNull(row.reactive_at),
    lateAt: isoOrNull(row.late_at),
    endsAt: isoOrNull(row.ends_at),
    firstSprayAt: isoOrNull(row.first_spray_at),
    lastSprayAt: isoOrNull(row.last_spray_at),
    closedAt: isoOrNull(row.closed_at),
    leftoverG: decimalOrNull(row.leftover_g),
    leftoverWeighed: row.leftover_weighed === null ? null : row.leftover_weighed === 1,
    disposal: row.disposal,
    used: row.used,
    worstDeviationPct: decimalOrNull(row.worst_deviation_pct),
    outOfTolerance: row.out_of_tolerance === 1,
    corrected: row.corrected === 1,
    reviewOpen: row.review_open === 1,
    amended: row.amended === 1,
  }
}
