import { D, print, type Dec } from '#shared/engine/decimal'
import { DEFAULT_HALVES_PER_C } from '#shared/engine/pot-life'
import { potState } from '#shared/engine/pot-state'
import { engineVersion } from '#shared/engine/version'
import type { BatchState } from '#shared/schemas/batch-states'
import type { ReviewCode } from '#shared/schemas/batches'
import type { BoothClash } from '#shared/utils/bench-booth'
import { shopDate } from '#shared/utils/zone'
import type { BatchSnapshot } from '../repositories/batch-page'
import type { BatchRecord, ComponentRecord, PourRecord } from '../repositories/batches'
import type { StoredDraft } from '../repositories/drafts'
import type { Drawn, StockLot } from '../repositories/lot-stock'
import type { MixRevision } from '../repositories/mix-revisions'
import { toInstant } from '../utils/rows'
import { mixInputOf, type BatchSums, type PotTimes } from './batch-sums'
import { lateEntryMs, notAfter } from './device-clock'
import type { DraftReferences } from './draft-references'
import { approvalActionOf, lotFaultsOf } from './draft-rules'

/** Layout of the snapshot stored with a batch. */
const snapshotVersion = 1

/** Everything known when a batch is sealed. Instants are epoch milliseconds. */
export interface Sealing {
  draft: StoredDraft
  references: DraftReferences
  sums: BatchSums
  times: PotTimes | null
  reactiveAt: number | null
  /** What must not meet in its booth; null where nothing clashes. */
  clash: BoothClash | null
  now: number
  /** The shop's time zone. */
  zone: string
}

/** Weighings of something, in pouring order; a tin that was named but never poured leaves no trace. */
export function poursOf({ draft, now }: Pick<Sealing, 'draft' | 'now'>): PourRecord[] {
  return draft.body.components.flatMap(({ index, pours }) => pours
    .filter(({ grams }) => new D(grams).gt(0))
    .map(({ lotId, grams, at, source, round }, position) => ({ index, position, lotId, grams, at: toInstant(notAfter(at, now)), source, round })))
}

/** What leaves each lot, summed. */
export function drawnOf(pours: readonly PourRecord[]): Drawn[] {
  const drawn = new Map<string, { grams: Dec; at: Date }>()
  for (const { lotId, grams, at } of pours) {
    const known = drawn.get(lotId)
    drawn.set(lotId, { grams: known ? known.grams.plus(grams) : new D(grams), at: known && known.at < at ? known.at : at })
  }
  return [...drawn].map(([lotId, { grams, at }]) => ({ lotId, grams: print(grams), at })).sort((a, b) => (a.lotId < b.lotId ? -1 : 1))
}

/** When the cup was made: with its last pour, or when it was stopped empty. */
export function mixedAtOf({ draft, now }: Pick<Sealing, 'draft' | 'now'>, pours: readonly PourRecord[]): number {
  const last = pours.map(({ at }) => at.getTime()).reduce<number | null>((most, at) => (most === null || at > most ? at : most), null)
  return last ?? (draft.body.stopped ? notAfter(draft.body.stopped.at, now) : now)
}

/** State of the pot at the moment of sealing. */
export function sealedState({ draft, times, now }: Sealing): BatchState {
  if (draft.body.stopped) return 'stopped'
  return times ? potState({ ...times, now }) : 'no-pot-life'
}

/** What a foreman should look at. A stopped mix is waste: its ratio is nobody's worry. */
export function reviewOf(sealing: Sealing, pours: readonly PourRecord[], mixedAt: number): ReviewCode[] {
  const { draft, references, sums, reactiveAt, now } = sealing
  const codes = new Set<ReviewCode>()
  if (!draft.body.stopped) {
    if (sums.outOfTolerance && !isApproved(draft, 'keep-as-poured', `batch:${draft.id}`)) codes.add('out-of-tolerance')
    if (references.revision.components.some(({ index }) => !pours.some((pour) => pour.index === index))) codes.add('not-complete')
    if (!pouredInOrder(pours)) codes.add('not-mixed-in-order')
    if (sealing.clash !== null) codes.add('booth-clash')
  }
  for (const pour of pours) {
    const lot = references.lots.get(pour.lotId)
    if (lot) for (const fault of openFaults(sealing, lot, pour.at.getTime())) codes.add(fault)
  }
  if (now - Math.min(reactiveAt ?? mixedAt, mixedAt) > lateEntryMs || draft.extras.notes.includes('late-entry')) codes.add('late-entry')
  if (draft.extras.notes.includes('clock-far-ahead')) codes.add('clock-ahead')
  return [...codes]
}

function openFaults({ draft, zone }: Sealing, lot: StockLot, pouredAt: number): ReviewCode[] {
  return lotFaultsOf(lot, shopDate(pouredAt, zone)).filter((fault) => {
    const action = approvalActionOf(fault, lot)
    return action === null || !isApproved(draft, action, `lot:${lot.id}`)
  })
}

const isApproved = ({ extras }: StoredDraft, action: string, subject: string): boolean =>
  extras.approved.some((one) => one.action === action && one.subject === subject)

/** Components follow the order of the mix: accelerator and peroxide must not meet undiluted. Corrections may come in any order. */
function pouredInOrder(pours: readonly PourRecord[]): boolean {
  const first = new Map<number, number>()
  for (const { index, round, at } of pours) {
    if (round === 0) first.set(index, Math.min(first.get(index) ?? at.getTime(), at.getTime()))
  }
  const starts = [...first].sort(([a], [b]) => a - b).map(([, at]) => at)
  return starts.every((at, place) => place === 0 || at >= (starts[place - 1] ?? at))
}

/** A decimal on its column's scale, half up; null stays null. */
const scaled = (value: string | null | undefined, decimals: number): string | null =>
  value === null || value === undefined ? null : new D(value).toDecimalPlaces(decimals).toString()

/** The largest percentage that the record can hold; beyond it nobody reads digits. */
const largestDeviationPct = new D('99999999')

/** A deviation as the record holds it. */
export const deviationOf = (pct: string | null): string | null =>
  pct === null ? null : scaled(D.min(pct, largestDeviationPct).toString(), 4)

/** Rows of the components, as meant and as poured. */
export function componentsOf({ references, sums, draft }: Sealing): ComponentRecord[] {
  const mix = mixInputOf(references.revision, draft.body.plan)
  return references.revision.components.map(({ index, materialId, role }) => {
    const planned = sums.plan.components[index]
    const poured = sums.pour.components[index]
    const parts = mix.components[index]
    if (!planned || !poured || !parts) throw new Error('the arithmetic lost a component')
    return {
      index,
      materialId,
      role,
      parts: parts.parts,
      plannedG: planned.targetG,
      targetG: poured.targetG,
      pouredG: poured.pouredG ?? '0',
      deviationPct: deviationOf(poured.deviationPct),
      verdict: poured.verdict,
    }
  })
}

/** The row of the batch itself. */
export function recordOf(sealing: Sealing, review: readonly ReviewCode[], mixedAt: number): BatchRecord {
  const { draft, references, sums, times, reactiveAt, now } = sealing
  const { body } = draft
  return {
    id: draft.id,
    code: draft.code,
    planId: body.planId,
    potNumber: body.potNumber,
    potCount: body.potCount,
    outcome: body.stopped ? 'stopped' : 'mixed',
    mixRevisionId: body.mixRevisionId,
    jobId: references.jobStep?.jobId ?? null,
    jobStepId: body.jobStepId,
    purpose: body.purpose,
    boothId: body.boothId,
    gunId: body.gunId,
    scaleId: body.scaleId,
    mixedByUserId: body.mixedByUserId,
    deviceId: draft.deviceId,
    mixedAt: toInstant(mixedAt),
    reactiveAt: reactiveAt === null ? null : toInstant(reactiveAt),
    sealedAt: toInstant(now),
    targetTotalG: sums.plan.targetTotalG,
    pouredTotalG: sums.pouredTotalG,
    areaM2: scaled(sums.plan.areaM2, 6),
    filmWeightGsm: scaled(body.plan.filmWeightGsm, 3),
    filmWeightIs: body.plan.filmWeightIs ?? null,
    coats: body.plan.filmWeightGsm === undefined ? null : (body.plan.coats ?? 1),
    transferEfficiencyPct: scaled(body.plan.transferEfficiencyPct, 4),
    potLifeMin: scaled(times?.potLifeMin, 3),
    potLifeBasis: times?.basis ?? null,
    lateAt: times && toInstant(times.lateAt),
    endsAt: times && toInstant(times.endsAt),
    airC: body.climate?.airC ?? null,
    rhPct: body.climate?.rhPct ?? null,
    surfaceC: body.climate?.surfaceC ?? null,
    materialC: body.viscosity?.materialC ?? null,
    viscosityCup: body.viscosity?.cup ?? null,
    viscositySeconds: body.viscosity?.seconds ?? null,
    review: [...review],
    snapshot: snapshotOf(sealing),
  }
}

function snapshotOf(sealing: Sealing): BatchSnapshot & Record<string, unknown> {
  const { draft, references, sums, times } = sealing
  const { body, extras } = draft
  const mix = mixInputOf(references.revision, body.plan)
  return {
    schemaVersion: snapshotVersion,
    engineVersion,
    plan: { ...body.plan, mix: { basis: mix.basis, components: [...mix.components] } },
    mix: references.revision,
    scale: references.scale,
    corrections: body.corrections,
    approvals: extras.approved,
    notes: extras.notes,
    clash: sealing.clash,
    device: body.device,
    stopped: body.stopped,
    working: times
      ? [...sums.working, { what: `pot life at ${times.temperatureC} °C`, formula: potLifeWords(times.basis, references.revision), value: times.potLifeMin, unit: 'min' }]
      : sums.working,
  }
}

function potLifeWords(basis: PotTimes['basis'], { potLifeMin, potLifeReferenceC, halvesPerC }: MixRevision): string {
  const sheet = potLifeMin === null || potLifeReferenceC === null ? 'the hottest row of the sheet' : `${potLifeMin} min at ${potLifeReferenceC} °C`
  if (basis === 'table') return 'from the table of the sheet'
  if (basis === 'held') return `${potLifeMin === null ? 'the coldest row of the sheet' : sheet}, not lengthened by the cold`
  return basis === 'sheet' ? sheet : `${sheet}, halved for every ${halvesPerC ?? DEFAULT_HALVES_PER_C} °C more`
}
