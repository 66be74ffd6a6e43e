import type { Knex } from 'knex'
import { D, print, sum } from '#shared/engine/decimal'
import type { BenchCup, BenchDraft, BenchLot, BenchMaterial, BenchMix, BenchPerson } from '#shared/schemas/bench'
import type { DraftBody } from '#shared/schemas/drafts'
import { decimalOf, decimalOrNull, isoOf, isoOrNull } from '../utils/rows'
import { stockSql } from './lots'
import { componentsOf } from './mixes'

type Db = Knex | Knex.Transaction

interface MixRow {
  id: string
  code: string
  name: string
  revision_id: string
  number: number
  basis: BenchMix['basis']
  pot_life_min: string | null
  pot_life_reference_c: string | null
  pot_life_table: string | null
  halves_per_c: string | null
  late_from_pct: string
  induction_min: string
  viscosity_cup: string | null
  viscosity_seconds_min: string | null
  viscosity_seconds_max: string | null
  density_g_per_ml: string | null
  notes: string | null
}

const mixRow = ['r.*', 'x.id', 'x.code', 'x.name', 'r.id as revision_id'] as const

/** Mixes in use with their present revision, by code. */
export async function listBenchMixes(db: Db): Promise<BenchMix[]> {
  const rows = await db('mixes as x').join('mix_revisions as r', 'r.id', 'x.current_revision_id').whereNull('x.archived_at').orderBy('x.code')
    .select<MixRow[]>(...mixRow)
  return await toBenchMixes(rows, db)
}

/** Revisions that pots are still being made by although they are no longer in use. */
export async function listHeldMixes(db: Db): Promise<BenchMix[]> {
  const rows = await db('mixes as x').join('mix_revisions as r', 'r.mix_id', 'x.id')
    .whereIn('r.id', db('batch_drafts').where('state', 'open').select('mix_revision_id'))
    .where(left => left.whereNotNull('x.archived_at').orWhereRaw('NOT (r.id <=> x.current_revision_id)')).orderBy(['x.code', 'r.number'])
    .select<MixRow[]>(...mixRow)
  return await toBenchMixes(rows, db)
}

async function toBenchMixes(rows: MixRow[], db: Db): Promise<BenchMix[]> {
  const components = await componentsOf(rows.map((row) => row.revision_id), db)
  return rows.map((row) => ({
    id: row.id,
    code: row.code,
    name: row.name,
    revisionId: row.revision_id,
    revisionNumber: row.number,
    basis: row.basis,
    potLifeMin: decimalOrNull(row.pot_life_min),
    potLifeReferenceC: decimalOrNull(row.pot_life_reference_c),
    potLifeTable: row.pot_life_table === null ? null : JSON.parse(row.pot_life_table) as BenchMix['potLifeTable'],
    halvesPerC: decimalOrNull(row.halves_per_c),
    lateFromPct: decimalOf(row.late_from_pct),
    inductionMin: decimalOf(row.induction_min),
    viscosityCup: row.viscosity_cup,
    viscositySecondsMin: decimalOrNull(row.viscosity_seconds_min),
    viscositySecondsMax: decimalOrNull(row.viscosity_seconds_max),
    densityGPerMl: decimalOrNull(row.density_g_per_ml),
    notes: row.notes,
    components: (components.get(row.revision_id) ?? []).map(({ index, materialId, role, parts, partsMax, tolerancePct, reactive }) =>
      ({ index, materialId, role, parts, partsMax, tolerancePct, reactive })),
  }))
}

interface MaterialRow {
  id: string
  code: string
  name: string
  role: BenchMaterial['role']
  chemistry: string
  contains_isocyanates: number
  density_g_per_ml: string | null
  price_per_kg: string | null
  signal_word: BenchMaterial['signalWord']
  hazard_codes: string
  protection_mixing: string | null
  protection_spraying: string | null
}

/** Materials in use, and these others, with the words of their hazards, by code. */
export async function listBenchMaterials(others: readonly string[], db: Db): Promise<BenchMaterial[]> {
  const rows = await db('materials').where(used => used.whereNull('archived_at').orWhereIn('id', [...others])).orderBy('code').select<MaterialRow[]>('*')
  const statements = await db('hazard_statements').select<{ code: string; text: string }[]>('code', 'text')
  const texts = new Map(statements.map(({ code, text }) => [code, text]))
  return rows.map((row) => ({
    id: row.id,
    code: row.code,
    name: row.name,
    role: row.role,
    chemistry: row.chemistry,
    containsIsocyanates: row.contains_isocyanates === 1,
    densityGPerMl: decimalOrNull(row.density_g_per_ml),
    pricePerKg: decimalOrNull(row.price_per_kg),
    signalWord: row.signal_word,
    hazards: (JSON.parse(row.hazard_codes) as string[]).map((code) => ({ code, text: texts.get(code) ?? code })),
    protectionMixing: row.protection_mixing,
    protectionSpraying: row.protection_spraying,
  }))
}

interface LotRow {
  id: string
  material_id: string
  lot_number: string
  expires_on: string | null
  opened_at: Date | null
  state: BenchLot['state']
  blocked_reason: string | null
  place: string | null
  price_per_kg: string | null
  stock_g: string
}

/** Lots with something in them, first the one that expires first; what is out of date or blocked is among them. */
export async function listBenchLots(db: Db): Promise<BenchLot[]> {
  const rows = await db('lots as l').whereIn('l.state', ['sealed', 'in-use', 'blocked']).whereRaw(`(l.state <> 'blocked' OR ${stockSql} > 0)`)
    .orderByRaw('COALESCE(l.expires_on, \'9999-12-31\'), l.state = \'sealed\', l.received_on, l.id')
    .select<LotRow[]>('l.*', db.raw(`${stockSql} AS stock_g`))
  return rows.map((row) => ({
    id: row.id,
    materialId: row.material_id,
    lotNumber: row.lot_number,
    expiresOn: row.expires_on,
    openedAt: isoOrNull(row.opened_at),
    state: row.state,
    blockedReason: row.blocked_reason,
    place: row.place,
    pricePerKg: decimalOrNull(row.price_per_kg),
    stockG: decimalOf(row.stock_g),
  }))
}

/** Mixing cups in use, the smallest first. */
export async function listBenchCups(db: Db): Promise<BenchCup[]> {
  const rows = await db('mixing_cups').where('active', true).orderBy(['capacity_ml', 'name', 'id'])
    .select<{ id: string; name: string; capacity_ml: string; fill_line_ml: string }[]>('*')
  return rows.map((row) => ({ id: row.id, name: row.name, capacityMl: decimalOf(row.capacity_ml), fillLineMl: decimalOf(row.fill_line_ml) }))
}

/** People who work here, by name; nothing but what a bench shows. */
export async function listBenchPeople(db: Db): Promise<BenchPerson[]> {
  return await db('users').where('active', true).orderBy(['name', 'id']).select<BenchPerson[]>('id', 'name', 'initials')
}

interface DraftRow {
  id: string
  code: string
  seq: number
  pot_number: number
  pot_count: number
  mix_revision_id: string
  mix_name: string
  job_step_id: string | null
  booth_id: string | null
  mixed_by_user_id: string
  mixed_by_name: string
  reactive_at: Date | null
  ends_at: Date | null
  device_name: string | null
  body: string
  updated_at: Date
}

/** Batches that are being made, the latest touched first. */
export async function listOpenDrafts(db: Db): Promise<BenchDraft[]> {
  const rows = await db('batch_drafts as d')
    .join('mix_revisions as r', 'r.id', 'd.mix_revision_id')
    .join('mixes as x', 'x.id', 'r.mix_id')
    .join('users as u', 'u.id', 'd.mixed_by_user_id')
    .leftJoin('devices as v', 'v.id', 'd.device_id')
    .leftJoin('timers as t', (on) => {
      on.on('t.subject_id', 'd.id').andOnVal('t.kind', 'pot-up').andOnVal('t.subject_type', 'batch')
    })
    .where('d.state', 'open')
    .orderBy([{ column: 'd.updated_at', order: 'desc' }, { column: 'd.id' }])
    .select<DraftRow[]>('d.*', 'x.name as mix_name', 'u.name as mixed_by_name', 'v.name as device_name', 't.due_at as ends_at')
  return rows.map(row => ({ row, body: JSON.parse(row.body) as Pick<DraftBody, 'components' | 'holder'> })).map(({ row, body }) => ({
    id: row.id,
    code: row.code,
    seq: row.seq,
    potNumber: row.pot_number,
    potCount: row.pot_count,
    mixRevisionId: row.mix_revision_id,
    mixName: row.mix_name,
    jobStepId: row.job_step_id,
    boothId: row.booth_id,
    mixedByUserId: row.mixed_by_user_id,
    mixedByName: row.mixed_by_name,
    reactiveAt: isoOrNull(row.reactive_at),
    endsAt: isoOrNull(row.ends_at),
    pouredG: print(sum(body.components.flatMap(({ pours }) => pours.map(({ grams }) => new D(grams))))),
    deviceName: row.device_name,
    holder: body.holder ?? null,
    updatedAt: isoOf(row.updated_at),
  }))
}
