import type { Knex } from 'knex'
import type { Mix, MixComponent, MixItem, MixListQuery, MixRevision, MixRevisionLine, PotLifeIs } from '#shared/schemas/mixes'
import { decimalOf, decimalOrNull, isoOf } from '../utils/rows'
import { whereContains } from './search'

type Db = Knex | Knex.Transaction

/** A component as stored, before shares are worked out. */
export type StoredComponent = Omit<MixComponent, 'sharePct' | 'tolerancePct' | 'toleranceGiven'> & { tolerancePct: string | null }

/** A revision as stored, before the engine adds to it. */
export type StoredRevision =
  Omit<MixRevision, 'components' | 'lateAfterMin' | 'densityIs' | 'working'> & { components: StoredComponent[] }

export type StoredMix = Pick<Mix, 'id' | 'code' | 'name' | 'archived' | 'version' | 'createdAt' | 'updatedAt'> & { currentRevisionId: string | null }

interface ItemRow {
  id: string
  code: string
  name: string
  current_revision_id: string | null
  archived_at: Date | null
  version: number
  created_at: Date
  updated_at: Date
  number: number | null
  basis: MixItem['basis']
  pot_life_min: string | null
  pot_life_reference_c: string | null
  pot_life_table: string | null
}

type Filter = Pick<MixListQuery, 'materialId' | 'chemistry' | 'q' | 'archived'>

/** Mixes by code, with what their current revision says. */
export async function listMixes(filter: Filter, page: { after: string | null, limit: number }, db: Db): Promise<MixItem[]> {
  const query = db('mixes as x').leftJoin('mix_revisions as r', 'r.id', 'x.current_revision_id')
    .select<ItemRow[]>('x.*', 'r.number', 'r.basis', 'r.pot_life_min', 'r.pot_life_reference_c', 'r.pot_life_table')
  if (filter.q) whereContains(query, ['x.code', 'x.name'], filter.q)
  if (filter.materialId) void query.whereExists(takes(db).where('c.material_id', filter.materialId))
  if (filter.chemistry) void query.whereExists(takes(db).where({ 'c.role': 'base', 'm.chemistry': filter.chemistry }))
  if (filter.archived) void query.whereNotNull('x.archived_at')
  else void query.whereNull('x.archived_at')
  if (page.after !== null) void query.where('x.code', '>', page.after)
  const rows = await query.orderBy('x.code').limit(page.limit)
  const components = await componentsOf(rows.flatMap(row => row.current_revision_id ?? []), db)
  return rows.map(row => toItem(row, components.get(row.current_revision_id ?? '') ?? []))
}

const takes = (db: Db) => db('mix_components as c').join('materials as m', 'm.id', 'c.material_id')
  .select(db.raw('1')).whereRaw('c.mix_revision_id = x.current_revision_id')

function toItem(row: ItemRow, components: StoredComponent[]): MixItem {
  const base = components.find(component => component.role === 'base')
  return {
    id: row.id,
    code: row.code,
    name: row.name,
    archived: row.archived_at !== null,
    version: row.version,
    currentRevisionId: row.current_revision_id,
    revisionNumber: row.number,
    basis: row.basis,
    parts: components.map(({ parts, partsMax }) => ({ parts, partsMax })),
    baseCode: base?.materialCode ?? null,
    baseName: base?.materialName ?? null,
    chemistry: base?.chemistry ?? null,
    containsIsocyanates: components.some(component => component.containsIsocyanates),
    potLifeIs: potLifeIs(row),
    potLifeMin: decimalOrNull(row.pot_life_min),
    potLifeReferenceC: decimalOrNull(row.pot_life_reference_c),
  }
}

export async function findMix(id: string, db: Db): Promise<StoredMix | null> {
  const row = await db('mixes').where({ id }).first<Omit<ItemRow, 'number'> | undefined>()
  if (!row) return null
  return {
    id: row.id, code: row.code, name: row.name, archived: row.archived_at !== null, version: row.version,
    currentRevisionId: row.current_revision_id, createdAt: isoOf(row.created_at), updatedAt: isoOf(row.updated_at),
  }
}

interface ComponentRow {
  mix_revision_id: string
  position: number
  material_id: string
  material_code: string
  material_name: string
  chemistry: string
  contains_isocyanates: number
  density_g_per_ml: string | null
  role: MixComponent['role']
  parts: string
  parts_max: string | null
  tolerance_pct: string | null
  reactive: number
}

/** Components by revision, in pouring order, with what their materials are today. */
export async function componentsOf(revisionIds: readonly string[], db: Db): Promise<Map<string, StoredComponent[]>> {
  const found = new Map<string, StoredComponent[]>()
  if (revisionIds.length === 0) return found
  const rows = await db('mix_components as c').join('materials as m', 'm.id', 'c.material_id')
    .whereIn('c.mix_revision_id', [...revisionIds]).orderBy(['c.mix_revision_id', 'c.position'])
    .select<ComponentRow[]>('c.*', 'm.code as material_code', 'm.name as material_name', 'm.chemistry', 'm.contains_isocyanates', 'm.density_g_per_ml')
  for (const row of rows) {
    const list = found.get(row.mix_revision_id) ?? []
    list.push({
      index: list.length,
      materialId: row.material_id,
      materialCode: row.material_code,
      materialName: row.material_name,
      role: row.role,
      parts: decimalOf(row.parts),
      partsMax: decimalOrNull(row.parts_max),
      tolerancePct: decimalOrNull(row.tolerance_pct),
      reactive: row.reactive === 1,
      densityGPerMl: decimalOrNull(row.density_g_per_ml),
      chemistry: row.chemistry,
      containsIsocyanates: row.contains_isocyanates === 1,
    })
    found.set(row.mix_revision_id, list)
  }
  return found
}

interface RevisionRow {
  id: string
  mix_id: string
  number: number
  basis: MixRevision['basis']
  pot_life_min: string | null
  pot_life_reference_c: string | null
  pot_life_table: string | null
  halves_per_c: string | null
  late_from_pct: string
  induction_min: string
  viscosity_cup: string | null
  viscosity_seconds_min: string | null
  viscosity_seconds_max: string | null
  viscosity_at_c: string | null
  density_g_per_ml: string | null
  volume_solids_pct: string | null
  leftover_share_pct: string | null
  pot_life_source: string | null
  notes: string | null
  created_at: Date
  created_by_name: string | null
}

const revisions = (db: Db) => db('mix_revisions as r').leftJoin('users as u', 'u.id', 'r.created_by_user_id')
  .select<RevisionRow[]>('r.*', 'u.name as created_by_name')

/** The revisions of these ids with their components, in no order. */
export async function findRevisions(ids: readonly string[], db: Db): Promise<StoredRevision[]> {
  if (ids.length === 0) return []
  const [rows, components] = await Promise.all([revisions(db).whereIn('r.id', [...ids]), componentsOf(ids, db)])
  return rows.map(row => toRevision(row, components.get(row.id) ?? []))
}

function potLifeIs(row: { pot_life_min: string | null, pot_life_table: string | null }): PotLifeIs {
  if (row.pot_life_table !== null) return 'table'
  return row.pot_life_min === null ? null : 'single'
}

const toRevision = (row: RevisionRow, components: StoredComponent[]): StoredRevision => ({
  id: row.id,
  mixId: row.mix_id,
  number: row.number,
  basis: row.basis,
  potLifeIs: potLifeIs(row),
  potLifeMin: decimalOrNull(row.pot_life_min),
  potLifeReferenceC: decimalOrNull(row.pot_life_reference_c),
  potLifeTable: row.pot_life_table === null ? null : JSON.parse(row.pot_life_table) as MixRevision['potLifeTable'],
  halvesPerC: decimalOrNull(row.halves_per_c),
  potLifeSource: row.pot_life_source,
  lateFromPct: decimalOf(row.late_from_pct),
  inductionMin: decimalOf(row.induction_min),
  viscosity: row.viscosity_cup === null ? null : {
    cup: row.viscosity_cup,
    secondsMin: decimalOrNull(row.viscosity_seconds_min),
    secondsMax: decimalOrNull(row.viscosity_seconds_max),
    atC: decimalOrNull(row.viscosity_at_c),
  },
  densityGPerMl: decimalOrNull(row.density_g_per_ml),
  volumeSolidsPct: decimalOrNull(row.volume_solids_pct),
  leftoverSharePct: decimalOrNull(row.leftover_share_pct),
  notes: row.notes,
  createdAt: isoOf(row.created_at),
  createdByName: row.created_by_name,
  components,
})

/** All revisions of a mix, the newest first, with how many batches were mixed by each. */
export async function listRevisions(mixId: string, db: Db): Promise<MixRevisionLine[]> {
  const rows = await revisions(db).where('r.mix_id', mixId).orderBy('r.number', 'desc')
  const ids = rows.map(row => row.id)
  const counts = await db('batches').whereIn('mix_revision_id', ids).groupBy('mix_revision_id')
    .select<{ mix_revision_id: string, batches: string }[]>('mix_revision_id', db.raw('COUNT(*) AS batches'))
  const count = new Map(counts.map(row => [row.mix_revision_id, Number(row.batches)]))
  const components = await componentsOf(ids, db)
  return rows.map(row => ({
    id: row.id, number: row.number, basis: row.basis,
    parts: (components.get(row.id) ?? []).map(({ parts, partsMax }) => ({ parts, partsMax })),
    potLifeIs: potLifeIs(row), potLifeMin: decimalOrNull(row.pot_life_min), notes: row.notes, createdAt: isoOf(row.created_at), createdByName: row.created_by_name,
    batchCount: count.get(row.id) ?? 0,
  }))
}

/** Schedules whose released revision sprays the mix, by code. */
export async function schedulesOf(mixId: string, db: Db): Promise<{ id: string, code: string, name: string }[]> {
  return await db('schedules as s')
    .whereExists(db('schedule_steps as t').join('schedule_revisions as r', 'r.id', 't.schedule_revision_id')
      .select(db.raw('1')).where({ 't.mix_id': mixId, 'r.state': 'released' }).whereRaw('r.schedule_id = s.id'))
    .whereNull('s.archived_at').orderBy('s.code').select('s.id', 's.code', 's.name')
}
