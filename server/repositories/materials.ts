import type { Knex } from 'knex'
import type { HazardStatement, Material, MaterialFields, MaterialListQuery, MaterialUse } from '#shared/schemas/materials'
import { decimalOf, decimalOrNull, isoOf, toInstant } from '../utils/rows'
import { stockSql, usableSql } from './lots'
import { whereContains } from './search'

type Db = Knex | Knex.Transaction

/** Sums over the lots of one material on one day. */
export interface MaterialStock {
  usableStockG: string
  lockedStockG: string
  usableLotCount: number
  nearestExpiresOn: string | null
}

/** A material as stored, with the codes of its statements; stock and texts are read apart. */
export type StoredMaterial =
  Omit<Material, keyof MaterialStock | 'nearestExpiresInDays' | 'reorder' | 'hazards' | 'lots' | 'usedIn'> & { hazardCodes: string[] }

interface Row {
  id: string
  code: string
  name: string
  role: Material['role']
  chemistry: string
  contains_isocyanates: number
  density_g_per_ml: string | null
  solids_pct: string | null
  volume_solids_pct: string | null
  reacts_pct: string | null
  voc_g_per_l: string | null
  voc_pct: string | null
  water_pct: string | null
  exempt_pct: string | null
  flash_point_c: string | null
  shelf_life_days: number | null
  supplier: string | null
  maker_code: string | null
  price_per_kg: string | null
  signal_word: Material['signalWord']
  hazard_codes: string
  protection_mixing: string | null
  protection_spraying: string | null
  reorder_point_g: string | null
  archived_at: Date | null
  version: number
  created_at: Date
  updated_at: Date
}

const toMaterial = (row: Row): StoredMaterial => ({
  id: row.id,
  code: row.code,
  name: row.name,
  role: row.role,
  chemistry: row.chemistry,
  containsIsocyanates: row.contains_isocyanates === 1,
  densityGPerMl: decimalOrNull(row.density_g_per_ml),
  solidsPct: decimalOrNull(row.solids_pct),
  volumeSolidsPct: decimalOrNull(row.volume_solids_pct),
  reactsPct: decimalOrNull(row.reacts_pct),
  vocGPerL: decimalOrNull(row.voc_g_per_l),
  vocPct: decimalOrNull(row.voc_pct),
  waterPct: decimalOrNull(row.water_pct),
  exemptPct: decimalOrNull(row.exempt_pct),
  flashPointC: decimalOrNull(row.flash_point_c),
  shelfLifeDays: row.shelf_life_days,
  supplier: row.supplier,
  makerCode: row.maker_code,
  pricePerKg: decimalOrNull(row.price_per_kg),
  signalWord: row.signal_word,
  hazardCodes: JSON.parse(row.hazard_codes) as string[],
  protectionMixing: row.protection_mixing,
  protectionSpraying: row.protection_spraying,
  reorderPointG: decimalOrNull(row.reorder_point_g),
  archived: row.archived_at !== null,
  version: row.version,
  createdAt: isoOf(row.created_at),
  updatedAt: isoOf(row.updated_at),
})

type Filter = Pick<MaterialListQuery, 'role' | 'chemistry' | 'q' | 'archived'>

/** Materials by code. Those archived are left out unless they are asked for. */
export async function listMaterials(filter: Filter, page: { after: string | null, limit: number }, db: Db): Promise<StoredMaterial[]> {
  const query = db('materials').select<Row[]>('materials.*')
  if (filter.role) void query.where({ role: filter.role })
  if (filter.chemistry) void query.where({ chemistry: filter.chemistry })
  if (filter.q) whereContains(query, ['code', 'name', 'maker_code'], filter.q)
  if (filter.archived) void query.whereNotNull('archived_at')
  else void query.whereNull('archived_at')
  if (page.after !== null) void query.where('code', '>', page.after)
  return (await query.orderBy('code').limit(page.limit)).map(toMaterial)
}

export async function findMaterial(id: string, db: Db): Promise<StoredMaterial | null> {
  const row = await db('materials').where({ id }).first<Row | undefined>()
  return row ? toMaterial(row) : null
}

/** The materials of these ids, in no order. */
export async function findMaterials(ids: readonly string[], db: Db): Promise<StoredMaterial[]> {
  if (ids.length === 0) return []
  return (await db('materials').whereIn('id', [...ids]).select<Row[]>('*')).map(toMaterial)
}

/** The same, kept from being changed until the transaction ends; in the order of their ids, so that nobody waits in a ring. */
export async function shareMaterials(ids: readonly string[], trx: Knex.Transaction): Promise<StoredMaterial[]> {
  if (ids.length === 0) return []
  return (await trx('materials').whereIn('id', [...ids]).orderBy('id').forShare().select<Row[]>('*')).map(toMaterial)
}

interface StockRow {
  material_id: string
  usable_g: string
  locked_g: string
  usable_lots: string
  nearest: string | null
}

/** Stock by material; one that never had a lot is missing from the map. `today` is the shop's date. */
export async function stockOf(materialIds: readonly string[], today: string, db: Db): Promise<Map<string, MaterialStock>> {
  if (materialIds.length === 0) return new Map()
  const lots = db('lots as l').whereIn('l.material_id', [...materialIds])
    .select('l.material_id', 'l.expires_on', db.raw(`${stockSql} AS stock_g`), db.raw(`${usableSql} AS usable`, [today])).as('s')
  const rows = await db.from(lots).groupBy('s.material_id').select<StockRow[]>('s.material_id',
    db.raw('COALESCE(SUM(CASE WHEN s.usable THEN s.stock_g END), 0) AS usable_g'),
    db.raw('COALESCE(SUM(CASE WHEN s.usable THEN NULL ELSE s.stock_g END), 0) AS locked_g'),
    db.raw('COUNT(CASE WHEN s.usable AND s.stock_g > 0 THEN 1 END) AS usable_lots'),
    db.raw('MIN(CASE WHEN s.usable AND s.stock_g > 0 THEN s.expires_on END) AS nearest'))
  return new Map(rows.map(row => [row.material_id, {
    usableStockG: decimalOf(row.usable_g),
    lockedStockG: decimalOf(row.locked_g),
    usableLotCount: Number(row.usable_lots),
    nearestExpiresOn: row.nearest,
  }]))
}

/** The statements of these codes, word for word, in the order of the codes. A code that is not known is left out. */
export async function hazardTexts(codes: readonly string[], db: Db): Promise<HazardStatement[]> {
  if (codes.length === 0) return []
  const rows = await db('hazard_statements').whereIn('code', [...codes]).select<HazardStatement[]>('code', 'kind', 'text')
  const known = new Map(rows.map(row => [row.code, row]))
  return codes.flatMap(code => known.get(code) ?? [])
}

interface UseRow {
  mix_id: string
  mix_code: string
  mix_name: string
  role: MaterialUse['role']
  parts: string
  parts_max: string | null
}

/** Mixes whose current revision takes the material, by code. */
export async function usesOf(materialId: string, db: Db): Promise<MaterialUse[]> {
  const rows = await db('mix_components as c').join('mixes as x', 'x.current_revision_id', 'c.mix_revision_id')
    .where('c.material_id', materialId).whereNull('x.archived_at').orderBy(['x.code', 'c.position'])
    .select<UseRow[]>('x.id as mix_id', 'x.code as mix_code', 'x.name as mix_name', 'c.role', 'c.parts', 'c.parts_max')
  return rows.map(row => ({
    mixId: row.mix_id, mixCode: row.mix_code, mixName: row.mix_name, role: row.role,
    parts: decimalOf(row.parts), partsMax: decimalOrNull(row.parts_max),
  }))
}

/** Every statement that a material may carry, H before EUH before P, by number. */
export async function listHazardStatements(db: Db): Promise<HazardStatement[]> {
  return await db('hazard_statements').orderByRaw("FIELD(kind, 'H', 'EUH', 'P'), code").select<HazardStatement[]>('code', 'kind', 'text')
}

const columns: Record<keyof MaterialFields, string> = {
  code: 'code', name: 'name', role: 'role', chemistry: 'chemistry', containsIsocyanates: 'contains_isocyanates', densityGPerMl: 'density_g_per_ml',
  solidsPct: 'solids_pct', volumeSolidsPct: 'volume_solids_pct', reactsPct: 'reacts_pct', vocGPerL: 'voc_g_per_l', vocPct: 'voc_pct',
  waterPct: 'water_pct', exemptPct: 'exempt_pct', flashPointC: 'flash_point_c', shelfLifeDays: 'shelf_life_days', supplier: 'supplier',
  makerCode: 'maker_code', pricePerKg: 'price_per_kg', signalWord: 'signal_word', hazardCodes: 'hazard_codes',
  protectionMixing: 'protection_mixing', protectionSpraying: 'protection_spraying', reorderPointG: 'reorder_point_g',
}

function toRow(fields: Partial<MaterialFields>): Record<string, unknown> {
  return Object.fromEntries(Object.entries(fields).flatMap(([name, value]) =>
    value === undefined ? [] : [[columns[name as keyof MaterialFields], name === 'hazardCodes' ? JSON.stringify(value) : value]]))
}

export async function insertMaterial(id: string, fields: MaterialFields, now: number, db: Db): Promise<void> {
  const at = toInstant(now)
  await db('materials').insert({ id, ...toRow(fields), created_at: at, updated_at: at })
}

/** Holds a material until the transaction ends, so that its lots are booked in and its references counted one by one. */
export async function lockMaterial(id: string, trx: Knex.Transaction): Promise<StoredMaterial | null> {
  const row = await trx('materials').where({ id }).forUpdate().first<Row | undefined>()
  return row ? toMaterial(row) : null
}

/** Writes what is given. The row must be locked. */
export async function updateMaterial(id: string, fields: Partial<MaterialFields>, archived: boolean | undefined, now: number, trx: Knex.Transaction): Promise<void> {
  const at = toInstant(now)
  await trx('materials').where({ id }).update({
    ...toRow(fields), ...(archived === undefined ? {} : { archived_at: archived ? at : null }), updated_at: at, version: trx.raw('version + 1'),
  })
}

export async function deleteMaterial(id: string, trx: Knex.Transaction): Promise<void> {
  await trx('materials').where({ id }).delete()
}

/** True when a lot or any revision of a mix, in use or not, refers to the material. */
export async function isReferenced(id: string, db: Db): Promise<boolean> {
  const lot = await db('lots').where('material_id', id).first('id')
  return lot !== undefined || (await db('mix_components').where('material_id', id).first('id')) !== undefined
}

/** Codes of the mixes in use that take the material by volume, so that its density must be known. */
export async function volumeMixesOf(id: string, db: Db): Promise<string[]> {
  return await db('mix_components as c').join('mixes as x', 'x.current_revision_id', 'c.mix_revision_id')
    .join('mix_revisions as r', 'r.id', 'c.mix_revision_id')
    .where({ 'c.material_id': id, 'r.basis': 'volume' }).whereNull('x.archived_at').orderBy('x.code').pluck<string[]>('x.code')
}
