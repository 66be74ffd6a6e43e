import type { Knex } from 'knex'
import type { Booth, Gun, MixingCup, Scale } from '#shared/schemas/shop'
import { decimalOf, decimalOrNull } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** Which page of a list by name. */
export interface NamePage {
  /** True: those taken out of use; false: those in use. */
  inactive: boolean
  after: { name: string, id: string } | null
  limit: number
}

export interface Head {
  id: string
  name: string
  active: number
  version: number
}

export const headOf = (row: Head) => ({ id: row.id, name: row.name, active: row.active === 1, version: row.version })

export function page(query: Knex.QueryBuilder, table: string, { inactive, after, limit }: NamePage): Knex.QueryBuilder {
  void query.where(`${table}.active`, !inactive)
  if (after) void query.whereRaw(`(${table}.name, ${table}.id) > (?, ?)`, [after.name, after.id])
  return query.orderBy([`${table}.name`, `${table}.id`]).limit(limit)
}

interface BoothRow extends Head {
  clearance_min: string
  clearance_measured: number
  extraction: Booth['extraction']
}

/** Booths by name. */
export async function listBooths(options: NamePage, db: Db): Promise<Booth[]> {
  const rows: BoothRow[] = await page(db('booths').select('booths.*'), 'booths', options)
  return rows.map(toBooth)
}

/** A booth, in use or not. */
export async function findBooth(id: string, db: Db): Promise<Booth | null> {
  const row = await db('booths').where({ id }).first<BoothRow | undefined>('*')
  return row ? toBooth(row) : null
}

const toBooth = (row: BoothRow): Booth => ({
  ...headOf(row),
  clearanceMin: decimalOf(row.clearance_min),
  clearanceMeasured: row.clearance_measured === 1,
  extraction: row.extraction,
})

interface GunRow extends Head {
  kind: Gun['kind']
  nozzle_mm: string | null
  booth_id: string | null
  booth_name: string | null
  efficiency_flat_pct: string
  efficiency_frames_pct: string
  efficiency_sticks_pct: string
  efficiency_measured: number
  residue_g: string
  smallest_fill_g: string
  flow_g_per_min: string | null
  pace_m2_per_h: string | null
}

/** Guns by name. */
export async function listGuns(options: NamePage, db: Db): Promise<Gun[]> {
  const query = db('guns').leftJoin('booths as b', 'b.id', 'guns.booth_id').select('guns.*', 'b.name as booth_name')
  const rows: GunRow[] = await page(query, 'guns', options)
  return rows.map(toGun)
}

/** The guns of these ids, in no order. */
export async function findGuns(ids: readonly string[], db: Db): Promise<Gun[]> {
  if (ids.length === 0) return []
  const rows: GunRow[] = await db('guns').leftJoin('booths as b', 'b.id', 'guns.booth_id')
    .whereIn('guns.id', [...ids]).select('guns.*', 'b.name as booth_name')
  return rows.map(toGun)
}

const toGun = (row: GunRow): Gun => ({
  ...headOf(row),
  kind: row.kind,
  nozzleMm: decimalOrNull(row.nozzle_mm),
  boothId: row.booth_id,
  boothName: row.booth_name,
  efficiencyFlatPct: decimalOf(row.efficiency_flat_pct),
  efficiencyFramesPct: decimalOf(row.efficiency_frames_pct),
  efficiencySticksPct: decimalOf(row.efficiency_sticks_pct),
  efficiencyMeasured: row.efficiency_measured === 1,
  residueG: decimalOf(row.residue_g),
  smallestFillG: decimalOf(row.smallest_fill_g),
  flowGPerMin: decimalOrNull(row.flow_g_per_min),
  paceM2PerH: decimalOrNull(row.pace_m2_per_h),
})

interface ScaleRow extends Head {
  source: Scale['source']
  division_g: string
  capacity_g: string
  mpe_g: string | null
  accuracy_class: Scale['accuracyClass']
  verification_interval_g: string | null
  next_check_on: string | null
}

/** Scales by name; how far off the next check is depends on the day. */
export async function listScales(options: NamePage, db: Db): Promise<Omit<Scale, 'nextCheckInDays'>[]> {
  const rows: ScaleRow[] = await page(db('scales').select('scales.*'), 'scales', options)
  return rows.map(toScale)
}

/** A scale, in use or not. */
export async function findScaleFacts(id: string, db: Db): Promise<Omit<Scale, 'nextCheckInDays'> | null> {
  const row = await db('scales').where({ id }).first<ScaleRow | undefined>('*')
  return row ? toScale(row) : null
}

const toScale = (row: ScaleRow): Omit<Scale, 'nextCheckInDays'> => ({
  ...headOf(row),
  source: row.source,
  divisionG: decimalOf(row.division_g),
  capacityG: decimalOf(row.capacity_g),
  mpeG: decimalOrNull(row.mpe_g),
  accuracyClass: row.accuracy_class,
  verificationIntervalG: decimalOrNull(row.verification_interval_g),
  nextCheckOn: row.next_check_on,
})

interface CupRow extends Head {
  capacity_ml: string
  fill_line_ml: string
}

/** Mixing cups by name. */
export async function listMixingCups(options: NamePage, db: Db): Promise<MixingCup[]> {
  const rows: CupRow[] = await page(db('mixing_cups').select('mixing_cups.*'), 'mixing_cups', options)
  return rows.map(toCup)
}

/** A mixing cup, in use or not. */
export async function findMixingCup(id: string, db: Db): Promise<MixingCup | null> {
  const row = await db('mixing_cups').where({ id }).first<CupRow | undefined>('*')
  return row ? toCup(row) : null
}

const toCup = (row: CupRow): MixingCup =>
  ({ ...headOf(row), capacityMl: decimalOf(row.capacity_ml), fillLineMl: decimalOf(row.fill_line_ml) })
