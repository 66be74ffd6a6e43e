import type { Knex } from 'knex'
import type { Basis, Role } from '#shared/engine/mix'
import type { TemperatureRow } from '#shared/engine/temperature'
import { decimalOf, decimalOrNull } from '../utils/rows'

type Db = Knex | Knex.Transaction

export interface RevisionComponent {
  /** Place in the pouring order, from 0. */
  index: number
  materialId: string
  materialCode: string
  materialName: string
  chemistry: string
  containsIsocyanates: boolean
  role: Role
  parts: string
  partsMax: string | null
  tolerancePct: string | null
  reactive: boolean
  densityGPerMl: string | null
}

/** One revision of a mix with its components in pouring order. Revisions never change. */
export interface MixRevision {
  id: string
  mixId: string
  mixCode: string
  mixName: string
  number: number
  basis: Basis
  potLifeMin: string | null
  potLifeReferenceC: string | null
  potLifeTable: TemperatureRow[] | null
  halvesPerC: string | null
  lateFromPct: string
  inductionMin: string
  components: RevisionComponent[]
}

interface RevisionRow {
  id: string
  mix_id: string
  mix_code: string
  mix_name: string
  number: number
  basis: Basis
  pot_life_min: string | null
  pot_life_reference_c: string | null
  pot_life_table: string | null
  halves_per_c: string | null
  late_from_pct: string
  induction_min: string
}

interface ComponentRow {
  material_id: string
  material_code: string
  material_name: string
  chemistry: string
  contains_isocyanates: number
  role: Role
  parts: string
  parts_max: string | null
  tolerance_pct: string | null
  reactive: number
  density_g_per_ml: string | null
}

export async function findMixRevision(id: string, db: Db): Promise<MixRevision | null> {
  const rows = await db('mix_revisions as r').join('mixes as m', 'm.id', 'r.mix_id')
    .join('mix_components as c', 'c.mix_revision_id', 'r.id').join('materials as a', 'a.id', 'c.material_id')
    .where('r.id', id).orderBy('c.position')
    .select<(RevisionRow & ComponentRow)[]>(
      'r.id', 'r.mix_id', 'm.code as mix_code', 'm.name as mix_name', 'r.number', 'r.basis', 'r.pot_life_min', 'r.pot_life_reference_c',
      'r.pot_life_table', 'r.halves_per_c', 'r.late_from_pct', 'r.induction_min',
      'c.material_id', 'a.code as material_code', 'a.name as material_name', 'a.chemistry', 'a.contains_isocyanates', 'c.role', 'c.parts',
      'c.parts_max', 'c.tolerance_pct', 'c.reactive', 'a.density_g_per_ml',
    )
  const [row] = rows
  if (!row) return null
  return {
    id: row.id,
    mixId: row.mix_id,
    mixCode: row.mix_code,
    mixName: row.mix_name,
    number: row.number,
    basis: row.basis,
    potLifeMin: decimalOrNull(row.pot_life_min),
    potLifeReferenceC: decimalOrNull(row.pot_life_reference_c),
    potLifeTable: row.pot_life_table === null ? null : (JSON.parse(row.pot_life_table) as TemperatureRow[]),
    halvesPerC: decimalOrNull(row.halves_per_c),
    lateFromPct: decimalOf(row.late_from_pct),
    inductionMin: decimalOf(row.induction_min),
    components: rows.map(toComponent),
  }
}

function toComponent(row: ComponentRow, index: number): RevisionComponent {
  return {
    index,
    materialId: row.material_id,
    materialCode: row.material_code,
    materialName: row.material_name,
    chemistry: row.chemistry,
    containsIsocyanates: row.contains_isocyanates === 1,
    role: row.role,
    parts: decimalOf(row.parts),
    partsMax: decimalOrNull(row.parts_max),
    tolerancePct: decimalOrNull(row.tolerance_pct),
    reactive: row.reactive === 1,
    densityGPerMl: decimalOrNull(row.density_g_per_ml),
  }
}
