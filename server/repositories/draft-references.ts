import type { Knex } from 'knex'
import type { OimlClass } from '#shared/engine/scale'
import { decimalOf, decimalOrNull } from '../utils/rows'
import { zoneOf } from './settings'

type Db = Knex | Knex.Transaction

/** A scale's record, as the arithmetic needs it. Grams. */
export interface ScaleRecord {
  id: string
  divisionG: string
  capacityG: string
  mpeG: string | null
  accuracyClass: OimlClass | null
  verificationIntervalG: string | null
}

interface ScaleRow {
  id: string
  division_g: string
  capacity_g: string
  mpe_g: string | null
  accuracy_class: OimlClass | null
  verification_interval_g: string | null
}

function toScale(row: ScaleRow): ScaleRecord {
  return {
    id: row.id,
    divisionG: decimalOf(row.division_g),
    capacityG: decimalOf(row.capacity_g),
    mpeG: decimalOrNull(row.mpe_g),
    accuracyClass: row.accuracy_class,
    verificationIntervalG: decimalOrNull(row.verification_interval_g),
  }
}

/** Single rows that a draft names, and the shop's time zone. */
export interface NamedPlaces {
  scale: ScaleRecord | null
  hasBooth: boolean
  hasGun: boolean
  hasUser: boolean
  /** IANA time zone. */
  zone: string
}

interface PlacesRow extends Omit<ScaleRow, 'id'> {
  id: string | null
  booth_id: string | null
  gun_id: string | null
  user_id: string | null
  shop: string | null
}

/** Looks single rows up by their ids, in one statement; what is archived is there too, since what was done with it stays true. */
export async function findPlaces(
  { scaleId, boothId, gunId, userId }: { scaleId: string | null, boothId: string | null, gunId: string | null, userId: string }, db: Db,
): Promise<NamedPlaces> {
  const row = await db.from(db.raw('(SELECT 1 AS one) AS n'))
    .leftJoin('scales as s', 's.id', db.raw('?', [scaleId]))
    .leftJoin('booths as b', 'b.id', db.raw('?', [boothId]))
    .leftJoin('guns as g', 'g.id', db.raw('?', [gunId]))
    .leftJoin('users as u', 'u.id', db.raw('?', [userId]))
    .leftJoin('settings as z', 'z.name', db.raw('?', ['shop']))
    .first<PlacesRow>(
      's.id', 's.division_g', 's.capacity_g', 's.mpe_g', 's.accuracy_class', 's.verification_interval_g',
      'b.id as booth_id', 'g.id as gun_id', 'u.id as user_id', 'z.value as shop',
    )
  return {
    scale: row.id === null ? null : toScale({ ...row, id: row.id }),
    hasBooth: row.booth_id !== null,
    hasGun: row.gun_id !== null,
    hasUser: row.user_id !== null,
    zone: zoneOf(row.shop),
  }
}

/** True when the row is there, in use or archived: what was done with it stays true. */
export async function isThere(table: 'booths' | 'guns' | 'users', id: string, db: Db): Promise<boolean> {
  return (await db(table).where({ id }).first('id')) !== undefined
}

/** A step of a job with what the schedule says of it. Minutes as decimals. */
export interface JobStep {
  id: string
  jobId: string
  jobCode: string
  title: string
  state: 'to-come' | 'started' | 'done'
  mixId: string | null
  coats: number
  faces: 'front' | 'back' | 'both' | 'edges' | 'all' | null
  coatIntervalMinMin: string | null
  coatIntervalMaxMin: string | null
  overcoatFromMin: string | null
  overcoatUntilMin: string | null
  sandFromMin: string | null
  sandUntilMin: string | null
}

interface JobStepRow {
  id: string
  job_id: string
  job_code: string
  title: string
  state: JobStep['state']
  mix_id: string | null
  coats: number | null
  faces: JobStep['faces']
  coat_interval_min_min: string | null
  coat_interval_max_min: string | null
  overcoat_from_min: string | null
  overcoat_until_min: string | null
  sand_from_min: string | null
  sand_until_min: string | null
}

/** Holds a job's step until the transaction ends. */
export async function lockJobStep(id: string, db: Db): Promise<void> {
  await db('job_steps').where({ id }).forUpdate().first('id')
}

export async function findJobStep(id: string, db: Db): Promise<JobStep | null> {
  const row = await db('job_steps as s')
    .join('jobs as j', 'j.id', 's.job_id')
    .join('schedule_steps as c', 'c.id', 's.schedule_step_id')
    .where('s.id', id)
    .first<JobStepRow | undefined>(
      's.id', 's.job_id', 'j.code as job_code', 'c.title', 's.state', 'c.mix_id', 'c.coats', 'c.faces', 'c.coat_interval_min_min',
      'c.coat_interval_max_min', 'c.overcoat_from_min', 'c.overcoat_until_min', 'c.sand_from_min', 'c.sand_until_min',
    )
  return row
    ? {
        id: row.id,
        jobId: row.job_id,
        jobCode: row.job_code,
        title: row.title,
        state: row.state,
        mixId: row.mix_id,
        coats: row.coats ?? 1,
        faces: row.faces,
        coatIntervalMinMin: decimalOrNull(row.coat_interval_min_min),
        coatIntervalMaxMin: decimalOrNull(row.coat_interval_max_min),
        overcoatFromMin: decimalOrNull(row.overcoat_from_min),
        overcoatUntilMin: decimalOrNull(row.overcoat_until_min),
        sandFromMin: decimalOrNull(row.sand_from_min),
        sandUntilMin: decimalOrNull(row.sand_until_min),
      }
    : null
}

/** How many of these pieces belong to the job. */
export async function countPiecesOf(jobId: string, pieceIds: readonly string[], db: Db): Promise<number> {
  const row = await db('pieces').where({ job_id: jobId }).whereIn('id', [...pieceIds]).count<{ n: number | string }[]>({ n: '*' })
  return Number(row[0]?.n ?? 0)
}

export async function pieceIdsOf(jobId: string, db: Db): Promise<string[]> {
  const rows = await db('pieces').where({ job_id: jobId }).orderBy('position').select<{ id: string }[]>('id')
  return rows.map(({ id }) => id)
}

/** Marks a step as started, where nothing had been done of it yet. */
export async function startJobStep(id: string, at: Date, db: Db): Promise<void> {
  await db('job_steps').where({ id, state: 'to-come' }).update({ state: 'started', updated_at: at, version: db.raw('version + 1') })
}

/** True when the person has ever signed in on this device. */
export async function hasSignedInAt(userId: string, deviceId: string, db: Db): Promise<boolean> {
  return (await db('sessions').where({ user_id: userId, device_id: deviceId }).first('id')) !== undefined
}
