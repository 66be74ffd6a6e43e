import type { Knex } from 'knex'
import type { Batch, BatchComponent } from '#shared/schemas/batches'
import { decimalOf, decimalOrNull, isoOf, isoOrNull } from '../utils/rows'
import { readAmendments } from './batch-amendments'
import type { EffectiveFacts } from './batch-record'
import { selectNamed, toNamed, type NamedRow } from './batch-rows'

type Db = Knex | Knex.Transaction

/** What lies beside a sealed batch as it was reckoned. */
export interface BatchSnapshot extends Pick<Batch, 'plan' | 'corrections' | 'stopped' | 'working' | 'engineVersion'> {
  schemaVersion: number
  notes: string[]
}

interface PageRow extends NamedRow {
  version: number
  plan_id: string
  mix_id: string
  mix_revision_id: string
  job_step_id: string | null
  scale_id: string | null
  scale_name: string | null
  device_name: string | null
  review: string
  snapshot: string
  effective: string | null
  area_m2: string | null
  film_weight_gsm: string | null
  film_weight_is: Batch['filmWeightIs']
  coats: number | null
  transfer_efficiency_pct: string | null
  pot_life_min: string | null
  pot_life_basis: NonNullable<Batch['potLife']>['basis'] | null
  air_c: string | null
  rh_pct: string | null
  surface_c: string | null
  material_c: string | null
  viscosity_cup: string | null
  viscosity_seconds: string | null
}

/**
 * Everything about one batch, in a fixed number of reads.
 *
 * @param options.fresh the batch was sealed in this transaction: nothing can have happened to it yet, so that its events,
 * amendments and coats are not looked for
 */
export async function findBatch(id: string, db: Db, { fresh = false } = {}): Promise<Batch | null> {
  const row = (await selectNamed(db('batches as b').join('batch_current as c', 'c.batch_id', 'b.id'))
    .leftJoin('scales as sc', 'sc.id', 'b.scale_id')
    .leftJoin('devices as d', 'd.id', 'b.device_id')
    .where('b.id', id)
    .select(
      'c.version', 'b.plan_id', 'r.mix_id', 'b.mix_revision_id', 'b.job_step_id', 'b.scale_id', 'sc.name as scale_name', 'd.name as device_name',
      'b.review', 'b.snapshot', 'c.effective', 'b.area_m2', 'b.film_weight_gsm', 'b.film_weight_is', 'b.coats', 'b.transfer_efficiency_pct', 'b.pot_life_min',
      'b.pot_life_basis', 'b.air_c', 'b.rh_pct', 'b.surface_c', 'b.material_c', 'b.viscosity_cup', 'b.viscosity_seconds',
    )
    .first()) as PageRow | undefined
  if (!row) return null
  const facts = row.effective === null ? null : (JSON.parse(row.effective) as EffectiveFacts)
  const { components, chemistry, containsIsocyanates } = await readComponents(id, facts, db)
  const snapshot = JSON.parse(row.snapshot) as BatchSnapshot
  const events = fresh ? [] : await readEvents(id, db)
  const page = toPage(row, facts)
  return {
    ...toNamed(row),
    ...page,
    openReview: row.review_open === 1 ? facts?.openReview ?? openReviewOf(page.review, events) : [],
    components,
    chemistry,
    containsIsocyanates,
    plan: snapshot.plan,
    corrections: snapshot.corrections,
    stopped: snapshot.stopped,
    working: facts?.working ?? snapshot.working,
    engineVersion: snapshot.engineVersion,
    // Pieces are always those of a step of a job.
    pieces: row.job_step_id === null ? [] : await readPieces(id, db),
    events,
    amendments: fresh ? [] : await readAmendments(id, db),
    applications: fresh ? [] : await readApplications(id, db),
  }
}

/** Codes that no settling names; one without names settled all that the record had. For batches that were never amended. */
function openReviewOf(review: Batch['review'], events: Batch['events']): Batch['review'] {
  const settled = events.filter(({ kind }) => kind === 'review-settled')
  const named = new Set(settled.flatMap(({ details }) => (Array.isArray(details.codes) ? details.codes.map(String) : review)))
  return review.filter((code) => !named.has(code))
}

function toPage(row: PageRow, facts: EffectiveFacts | null) {
  return {
    version: row.version,
    planId: row.plan_id,
    mixId: row.mix_id,
    mixRevisionId: row.mix_revision_id,
    jobStepId: row.job_step_id,
    scaleId: row.scale_id,
    scaleName: row.scale_name,
    deviceName: row.device_name,
    review: facts?.review ?? (JSON.parse(row.review) as Batch['review']),
    note: facts?.note ?? null,
    areaM2: decimalOrNull(row.area_m2),
    filmWeightGsm: decimalOrNull(row.film_weight_gsm),
    filmWeightIs: row.film_weight_is,
    coats: row.coats,
    transferEfficiencyPct: decimalOrNull(row.transfer_efficiency_pct),
    potLife: potLifeOf(row, facts ? facts.potLife : recordedLife(row)),
    ...conditionsOf(facts ?? {
      airC: decimalOrNull(row.air_c), rhPct: decimalOrNull(row.rh_pct), surfaceC: decimalOrNull(row.surface_c), materialC: decimalOrNull(row.material_c),
      viscosityCup: row.viscosity_cup, viscositySeconds: decimalOrNull(row.viscosity_seconds),
    }),
  }
}

const recordedLife = ({ pot_life_basis: basis, pot_life_min: min }: PageRow): EffectiveFacts['potLife'] =>
  (basis && min ? { basis, potLifeMin: decimalOf(min) } : null)

function potLifeOf({ reactive_at: startsAt, late_at: lateAt, ends_at: endsAt }: PageRow, life: EffectiveFacts['potLife']): Batch['potLife'] {
  if (!startsAt || !lateAt || !endsAt || !life) return null
  return { startsAt: isoOf(startsAt), lateAt: isoOf(lateAt), endsAt: isoOf(endsAt), ...life }
}

type Conditions = Pick<EffectiveFacts, 'airC' | 'rhPct' | 'surfaceC' | 'materialC' | 'viscosityCup' | 'viscositySeconds'>

function conditionsOf({ airC, rhPct, surfaceC, materialC, viscosityCup: cup, viscositySeconds: seconds }: Conditions): Pick<Batch, 'climate' | 'viscosity'> {
  return {
    climate: airC === null && rhPct === null && surfaceC === null ? null : { airC, rhPct, surfaceC },
    viscosity: cup === null && seconds === null && materialC === null ? null : { cup, seconds, materialC },
  }
}

interface ComponentRow {
  component_index: number
  role: BatchComponent['role']
  material_id: string
  material_code: string
  material_name: string
  chemistry: string
  contains_isocyanates: number
  parts: string
  planned_g: string
  target_g: string
  poured_g: string
  deviation_pct: string | null
  verdict: BatchComponent['verdict']
}

interface PourRow {
  component_index: number
  position: number
  lot_id: string
  lot_number: string
  grams: string
  at: Date
  source: BatchComponent['pours'][number]['source']
  round: number
}

/** A component with one of its pours; null where nothing was poured. */
type PouredRow = ComponentRow & { [K in Exclude<keyof PourRow, 'component_index'>]: PourRow[K] | null }

const isPour = (row: PouredRow): row is ComponentRow & PourRow => row.position !== null

type Pour = BatchComponent['pours'][number] & { index: number }

async function poursOf(rows: readonly PouredRow[], facts: EffectiveFacts | null, db: Db): Promise<Pour[]> {
  const recorded = rows.filter(isPour).map((row) => ({
    index: row.component_index, position: row.position, lotId: row.lot_id, lotNumber: row.lot_number, grams: decimalOf(row.grams), at: isoOf(row.at),
    source: row.source, round: row.round,
  }))
  if (facts === null) return recorded
  const lots = await db('lots').whereIn('id', facts.pours.map(({ lotId }) => lotId)).select<{ id: string; lot_number: string }[]>('id', 'lot_number')
  return recorded.map((pour) => {
    const now = facts.pours.find(({ index, position }) => index === pour.index && position === pour.position)
    const lot = lots.find(({ id: lotId }) => lotId === now?.lotId)
    return now && lot ? { ...pour, lotId: lot.id, lotNumber: lot.lot_number, grams: now.grams } : pour
  })
}

async function readComponents(id: string, facts: EffectiveFacts | null, db: Db): Promise<Pick<Batch, 'components' | 'chemistry' | 'containsIsocyanates'>> {
  const poured = await db('batch_components as x').join('materials as a', 'a.id', 'x.material_id')
    .leftJoin('batch_pours as p', (on) => void on.on('p.batch_id', 'x.batch_id').andOn('p.component_index', 'x.component_index'))
    .leftJoin('lots as l', 'l.id', 'p.lot_id')
    .where('x.batch_id', id).orderBy(['x.component_index', 'p.position'])
    .select<PouredRow[]>(
      'x.component_index', 'x.role', 'x.material_id', 'a.code as material_code', 'a.name as material_name', 'a.chemistry', 'a.contains_isocyanates',
      'x.parts', 'x.planned_g', 'x.target_g', 'x.poured_g', 'x.deviation_pct', 'x.verdict',
      'p.position', 'p.lot_id', 'l.lot_number', 'p.grams', 'p.at', 'p.source', 'p.round',
    )
  const pours = await poursOf(poured, facts, db)
  const rows = poured.filter((row, place) => poured[place - 1]?.component_index !== row.component_index)
  const components = rows.map((row) => toComponent(row, facts, pours))
  const base = rows.find(({ role }) => role === 'base') ?? rows[0]
  return { components, chemistry: base?.chemistry ?? null, containsIsocyanates: rows.some((row) => row.contains_isocyanates === 1) }
}

function toComponent(row: ComponentRow, facts: EffectiveFacts | null, pours: readonly Pour[]): BatchComponent {
  const now = facts?.components.find(({ index }) => index === row.component_index)
  return {
    index: row.component_index,
    role: row.role,
    materialId: row.material_id,
    materialCode: row.material_code,
    materialName: row.material_name,
    parts: decimalOf(row.parts),
    plannedG: decimalOf(row.planned_g),
    targetG: now?.targetG ?? decimalOf(row.target_g),
    pouredG: now?.pouredG ?? decimalOf(row.poured_g),
    deviationPct: now ? now.deviationPct : decimalOrNull(row.deviation_pct),
    verdict: now ? now.verdict : row.verdict,
    pours: pours.filter(({ index }) => index === row.component_index).map(({ index: _index, ...pour }) => pour),
  }
}

interface PieceRow {
  id: string
  position: number
  label: string
  quantity: number
  area_m2: string
  rack: string | null
}

async function readPieces(id: string, db: Db): Promise<Batch['pieces']> {
  const rows = await db('batch_pieces as x').join('pieces as p', 'p.id', 'x.piece_id').where('x.batch_id', id).orderBy(['p.position', 'p.id'])
    .select<PieceRow[]>('p.id', 'p.position', 'p.label', 'p.quantity', 'p.area_m2', 'p.rack')
  return rows.map(({ area_m2: areaM2, ...piece }) => ({ ...piece, areaM2: decimalOf(areaM2) }))
}

interface EventRow {
  id: string
  kind: Batch['events'][number]['kind']
  at: Date
  user_name: string | null
  device_name: string | null
  gun_name: string | null
  booth_name: string | null
  details: string
}

async function readEvents(id: string, db: Db): Promise<Batch['events']> {
  const rows = await db('batch_events as e')
    .leftJoin('users as u', 'u.id', 'e.user_id').leftJoin('devices as d', 'd.id', 'e.device_id')
    .leftJoin('guns as g', 'g.id', 'e.gun_id').leftJoin('booths as o', 'o.id', 'e.booth_id')
    .where('e.batch_id', id).orderBy(['e.at', 'e.created_at', 'e.id'])
    .select<EventRow[]>('e.id', 'e.kind', 'e.at', 'u.name as user_name', 'd.name as device_name', 'g.name as gun_name', 'o.name as booth_name', 'e.details')
  return rows.map((row) => ({
    id: row.id,
    kind: row.kind,
    at: isoOf(row.at),
    userName: row.user_name,
    deviceName: row.device_name,
    gunName: row.gun_name,
    boothName: row.booth_name,
    details: JSON.parse(row.details) as Record<string, unknown>,
  }))
}

interface ApplicationRow {
  id: string
  first_at: Date
  last_at: Date
  last_assumed: number
  details: string
  opens_at: Date | null
  closing_at: Date | null
  closes_at: Date | null
}

async function readApplications(id: string, db: Db): Promise<Batch['applications']> {
  const rows = await db('application_batches as l').join('applications as a', 'a.id', 'l.application_id').join('application_current as n', 'n.application_id', 'a.id')
    .where('l.batch_id', id).orderBy(['n.first_at', 'a.created_at', 'a.id'])
    .select<ApplicationRow[]>('a.id', 'n.first_at', 'n.last_at', 'a.last_assumed', 'a.details', 'n.opens_at', 'n.closing_at', 'n.closes_at')
  return rows.map((row) => ({
    id: row.id,
    firstAt: isoOf(row.first_at),
    lastAt: isoOf(row.last_at),
    firstAssumed: (JSON.parse(row.details) as { firstAssumed?: boolean }).firstAssumed === true,
    lastAssumed: row.last_assumed === 1,
    opensAt: isoOrNull(row.opens_at),
    closingAt: isoOrNull(row.closing_at),
    closesAt: isoOrNull(row.closes_at),
  }))
}
