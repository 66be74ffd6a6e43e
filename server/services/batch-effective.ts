import { D, print, sum, type Dec } from '#shared/engine/decimal'
import { readMix } from '#shared/engine/mix'
import { potState } from '#shared/engine/pot-state'
import { pourFieldOf } from '#shared/schemas/amendments'
import { reviewCodes, type ReviewCode } from '#shared/schemas/batches'
import type { DraftBody } from '#shared/schemas/drafts'
import { gunSprays, sprayedSpan } from '#shared/utils/pot-sprays'
import type { EffectiveCurrent } from '../repositories/batch-current'
import type { BatchOnRecord, EffectiveFacts, RecordComponent, RecordPour } from '../repositories/batch-record'
import { judgeBatch, mixInputOf, potTimesOf, wasCorrected } from './batch-sums'
import { deviationOf } from './seal-facts'

/** A batch as it is now, by its record alone, with every value that can be amended by the name of its field. */
export interface EffectiveBatch {
  current: EffectiveCurrent
  facts: EffectiveFacts
  /** Present value of each field that can be amended: decimals, instants in UTC or ids as text. */
  values: ReadonlyMap<string, string | null>
  /** Codes that nobody settled. */
  openReview: ReviewCode[]
}

const iso = (ms: number | null) => (ms === null ? null : new Date(ms).toISOString())
const msOf = (value: string | null | undefined) => (value ? Date.parse(value) : null)

/**
 * Reads the record from its first entry to its last amendment. The present state of every batch is this and nothing
 * else, so that it can be made anew.
 *
 * @param now epoch milliseconds; only the state of a running pot depends on it
 */
export function effectiveOf(record: BatchOnRecord, now: number): EffectiveBatch {
  const values = recordedValues(record)
  for (const { field, to } of record.amendments) values.set(field, to)
  spraySince(record, values)
  const get = (field: string) => values.get(field) ?? null
  const cup = cupOf(record, values)
  const life = lifeOf(record, get)
  const lastSprayAt = msOf(get('lastSprayAt'))
  const closedAt = msOf(get('closedAt'))
  const review = reviewNow(record, cup)
  const openReview = openOf(record, review)
  const emptied = record.events.find(({ kind }) => kind === 'emptied')
  const leftoverG = get('leftoverG')
  const facts: EffectiveFacts = {
    ...cup, airC: get('airC'), rhPct: get('rhPct'), surfaceC: get('surfaceC'), materialC: get('materialC'), viscosityCup: get('viscosityCup'),
    viscositySeconds: get('viscositySeconds'), potLife: life.potLife, review: review.review, openReview, note: get('note'),
  }
  const amended = record.amendments.length > 0
  return {
    values,
    openReview,
    facts,
    current: {
      batchId: record.id, mixedAt: record.mixedAt, state: stateOf(record, closedAt, life, now), boothId: get('boothId'), jobId: record.jobId,
      mixedByUserId: get('mixedByUserId') ?? record.mixedByUserId, gunId: get('gunId'), purpose: get('purpose'),
      reactiveAt: msOf(get('reactiveAt')), lateAt: life.lateAt, endsAt: life.endsAt, firstSprayAt: msOf(get('firstSprayAt')), lastSprayAt, closedAt,
      leftoverG, leftoverWeighed: emptied ? leftoverG !== null : null, disposal: emptied ? String(emptied.details.disposal) : null,
      used: usedOf(life, lastSprayAt), pouredTotalG: print(sum(cup.pours.map(({ grams }) => new D(grams)))), ...spreadOf(record, cup.components),
      corrected: wasCorrected(record.snapshot.corrections, cup.pours, cup.components),
      reviewOpen: openReview.length > 0, amended, effective: amended ? facts : null,
    },
  }
}

/** Every field as the record and its events have it. */
function recordedValues(record: BatchOnRecord): Map<string, string | null> {
  const { firstAt, lastAt } = sprayedSpan(gunSprays(shotsOf(record.events)))
  const emptied = record.events.find(({ kind }) => kind === 'emptied')
  const stoppedAt = record.snapshot.stopped && Math.min(Date.parse(record.snapshot.stopped.at), record.sealedAt)
  const leftover = emptied?.details.leftoverG
  const values = new Map<string, string | null>([
    ['reactiveAt', iso(record.reactiveAt)],
    ['firstSprayAt', iso(firstAt)],
    ['lastSprayAt', iso(lastAt)],
    ['closedAt', iso(emptied?.at ?? stoppedAt)],
    ['leftoverG', typeof leftover === 'string' ? print(new D(leftover)) : null],
    ['gunId', record.gunId], ['boothId', record.boothId], ['mixedByUserId', record.mixedByUserId], ['purpose', record.purpose],
    ['airC', record.airC], ['rhPct', record.rhPct], ['surfaceC', record.surfaceC], ['materialC', record.materialC],
    ['viscosityCup', record.viscosityCup], ['viscositySeconds', record.viscositySeconds], ['note', null],
  ])
  for (const pour of record.pours) {
    values.set(`pours.${pour.index}.${pour.position}.grams`, pour.grams)
    values.set(`pours.${pour.index}.${pour.position}.lotId`, pour.lotId)
  }
  return values
}

const shotsOf = (events: BatchOnRecord['events']) =>
  events.flatMap(({ kind, at, gunId }) => (kind === 'first-spray' || kind === 'last-spray' ? [{ kind, at, gunId, gunName: null }] : []))

/** A spray that was put right covers what was noted until then; what a gun did after that lengthens it. */
function spraySince(record: BatchOnRecord, values: Map<string, string | null>): void {
  for (const field of ['firstSprayAt', 'lastSprayAt']) {
    const amended = record.amendments.findLast((one) => one.field === field)
    const amendedAt = msOf(amended?.to)
    if (!amended || amendedAt === null) continue
    const since = gunSprays(shotsOf(record.events.filter(({ notedAt }) => notedAt > amended.at)))
    if (field === 'firstSprayAt') values.set(field, iso(Math.min(amendedAt, ...since.flatMap(({ firstAt }) => firstAt ?? []))))
    else if (sprayedSpan(since).unended.length > 0) values.set(field, null)
    else values.set(field, iso(Math.max(amendedAt, ...since.flatMap(({ lastAt }) => lastAt ?? []))))
  }
}

type Cup = Pick<EffectiveFacts, 'pours' | 'components' | 'working'>

/** What is in the cup. Where a weight was amended, everything that follows from it is reckoned again. */
function cupOf(record: BatchOnRecord, values: ReadonlyMap<string, string | null>): Cup {
  const pours = record.pours.map((pour): RecordPour => ({
    ...pour,
    grams: values.get(`pours.${pour.index}.${pour.position}.grams`) ?? pour.grams,
    lotId: values.get(`pours.${pour.index}.${pour.position}.lotId`) ?? pour.lotId,
  }))
  const { snapshot, components } = record
  if (!record.amendments.some(({ field }) => pourFieldOf(field)?.what === 'grams')) return { pours, components, working: snapshot.working }
  const sums = judgeBatch(snapshot.mix, { plan: snapshot.plan, components: bodyOf(pours), corrections: snapshot.corrections }, snapshot.scale)
  const kept = snapshot.working.filter(({ what }) => what.startsWith('pot life'))
  return { pours, components: components.map((component) => judged(component, sums)), working: [...sums.working, ...kept] }
}

function judged(component: RecordComponent, { pour }: ReturnType<typeof judgeBatch>): RecordComponent {
  const now = pour.components[component.index]
  if (!now) throw new Error('the arithmetic lost a component')
  return { ...component, targetG: now.targetG, pouredG: now.pouredG ?? '0', deviationPct: deviationOf(now.deviationPct), verdict: now.verdict }
}

/** Weighings as a draft has them. */
function bodyOf(pours: readonly RecordPour[]): DraftBody['components'] {
  const indexes = [...new Set(pours.map(({ index }) => index))]
  return indexes.map((index) => ({
    index,
    pours: pours.filter((pour) => pour.index === index).map(({ lotId, grams, at, source, round }) => ({ lotId, grams, at: new Date(at).toISOString(), source, round })),
  }))
}

interface Life {
  lateAt: number | null
  endsAt: number | null
  potLife: BatchOnRecord['potLife']
}

/** The pot's life; reckoned again where its start or a temperature was amended. */
function lifeOf(record: BatchOnRecord, get: (field: string) => string | null): Life {
  const moved = record.amendments.some(({ field }) => ['reactiveAt', 'airC', 'materialC'].includes(field))
  if (!moved) return record
  const airC = get('airC')
  const materialC = get('materialC')
  const times = potTimesOf(record.snapshot.mix, {
    climate: airC === null ? null : { airC, rhPct: get('rhPct') ?? '0', surfaceC: get('surfaceC') },
    viscosity: materialC === null ? null : { cup: '', seconds: '0', materialC },
  }, msOf(get('reactiveAt')))
  if (times === null) return { lateAt: null, endsAt: null, potLife: null }
  return { lateAt: times.lateAt, endsAt: times.endsAt, potLife: { basis: times.basis, potLifeMin: new D(times.potLifeMin).toDecimalPlaces(3).toString() } }
}

function stateOf({ outcome }: BatchOnRecord, closedAt: number | null, { lateAt, endsAt }: Life, now: number): EffectiveCurrent['state'] {
  if (outcome === 'stopped') return 'stopped'
  if (closedAt !== null) return 'emptied'
  if (lateAt === null || endsAt === null) return 'no-pot-life'
  return potState({ startsAt: lateAt, lateAt, endsAt, now })
}

/** Whether the pot was still good at its last spray; null where it was not sprayed or has no pot life. */
export function usedOf({ lateAt, endsAt }: Pick<Life, 'lateAt' | 'endsAt'>, lastSprayAt: number | null): EffectiveCurrent['used'] {
  if (lastSprayAt === null || lateAt === null || endsAt === null) return null
  if (lastSprayAt > endsAt) return 'past-life'
  return lastSprayAt > lateAt ? 'late' : 'in-time'
}

/** How far what follows the base is off. The base is judged for the record only. */
function spreadOf(record: BatchOnRecord, components: readonly RecordComponent[]): Pick<EffectiveCurrent, 'worstDeviationPct' | 'worstRole' | 'outOfTolerance'> {
  const { baseIndex } = readMix(mixInputOf(record.snapshot.mix, record.snapshot.plan))
  const followers = components.filter(({ index }) => index !== baseIndex)
  const worst = followers.reduce<{ pct: Dec; role: string } | null>((most, { deviationPct, role }) => {
    const pct = deviationPct === null ? null : new D(deviationPct)
    return pct !== null && (most === null || pct.abs().gt(most.pct.abs())) ? { pct, role } : most
  }, null)
  return {
    worstDeviationPct: worst && print(worst.pct),
    worstRole: worst && worst.role,
    outOfTolerance: record.outcome === 'mixed' && followers.some(({ verdict }) => verdict === 'short' || verdict === 'too-much'),
  }
}

/** What a foreman should look at: what the record says, and what an amended weight or booth brought up. */
function reviewNow(record: BatchOnRecord, cup: Cup): Review {
  const found = new Map<ReviewCode, number>()
  const weighed = record.amendments.findLast(({ field }) => pourFieldOf(field)?.what === 'grams')
  if (weighed && record.outcome === 'mixed') {
    const approved = record.snapshot.approvals.some(({ action, subject }) => action === 'keep-as-poured' && subject === `batch:${record.id}`)
    if (spreadOf(record, cup.components).outOfTolerance && !approved) found.set('out-of-tolerance', weighed.at)
    if (cup.components.some(({ pouredG }) => new D(pouredG).eq(0))) found.set('not-complete', weighed.at)
  }
  const moved = record.amendments.findLast(({ field }) => field === 'boothId')
  if (moved?.clashes) found.set('booth-clash', moved.at)
  return { review: reviewCodes.filter((code) => found.has(code) || record.review.includes(code)), found }
}

interface Review {
  review: ReviewCode[]
  /** Those that an amended weight or booth brings up, each with the moment of the amendment, epoch milliseconds. */
  found: ReadonlyMap<ReviewCode, number>
}

/**
 * Codes that no foreman settled. An event that names none settled all there were. A weight or booth that was amended
 * after that opens what it brings up anew.
 */
function openOf(record: BatchOnRecord, { review, found }: Review): ReviewCode[] {
  const settledAt = new Map<string, number>()
  for (const { kind, at, details } of record.events) {
    if (kind !== 'review-settled') continue
    for (const code of Array.isArray(details.codes) ? details.codes.map(String) : record.review) settledAt.set(code, at)
  }
  return review.filter((code) => {
    const at = settledAt.get(code)
    return at === undefined || (found.get(code) ?? at) > at
  })
}
