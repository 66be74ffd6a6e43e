import { D, print, sum } from '#shared/engine/decimal'
import { pourFieldOf, type AmendmentBody } from '#shared/schemas/amendments'
import type { Batch } from '#shared/schemas/batches'
import type { BoothClash } from '#shared/utils/bench-booth'
import { disposalFor } from '#shared/utils/disposal'
import { insertAmendment } from '../repositories/batch-amendments'
import { lockCurrent, rewriteCurrent, type CurrentBatch } from '../repositories/batch-current'
import { findBatch } from '../repositories/batch-page'
import { lockBooths } from '../repositories/booth-locks'
import { readRecord, type BatchOnRecord } from '../repositories/batch-record'
import { rewriteUses } from '../repositories/batch-uses'
import { insertWaste } from '../repositories/batches'
import { compensateLots, type Compensation } from '../repositories/lot-compensation'
import { lockLots } from '../repositories/lot-stock'
import { findPotContent } from '../repositories/sprays'
import { lockOpenApprovals, useApprovals } from '../repositories/used-approvals'
import { userIdOf, type Context } from '../utils/context'
import { forbidden, notFound, Refusal, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { toInstant } from '../utils/rows'
import { mutate, type Mutation } from '../utils/transactions'
import { requireAmender, requireLot, requireTrue, signingOf, type Signing } from './amendment-rules'
import { checkedValue, isFreeText, plainValue } from './amendment-values'
import { effectiveOf, type EffectiveBatch } from './batch-effective'
import { baseChemistryOf } from './batch-sums'
import { resettleShots } from './booth-air'
import { clashAt } from './booth-guard'
import { moveWindows, rewriteCoats } from './coat-amendments'
import { potAnswer } from './pot-lock'
import { publishPot } from './pot-view'
import { cancelTimers, setPotTimers } from './timers'
import { publishUnended } from './windows'

/** A batch before and after an amendment, with what the rules ask for. */
interface Change {
  field: string
  record: BatchOnRecord
  /** The record with the amendment in it. */
  amended: BatchOnRecord
  before: EffectiveBatch
  after: EffectiveBatch
  pot: CurrentBatch
}

/**
 * Puts one value of a logged batch right. The record stays as it was written; the amendment stands beside it with its
 * reason, and everything that follows from the value is reckoned again: verdicts, stock, pot life and its timers.
 *
 * @throws Refusal 404, 403 for another's batch or a day that is over, 409 when `from` no longer holds, 400 and 422 for a
 * value that cannot be, 422 `approval-needed` where a foreman has to sign
 */
export function amendBatch(ctx: Context, id: string, body: AmendmentBody): Promise<Batch> {
  return mutate(ctx, async (m) => {
    const userId = userIdOf(ctx.principal)
    if (userId === null) throw forbidden('Sign in to amend a batch.')
    const pot = await lockCurrent(id, m.trx)
    const record = pot && (await readRecord(id, m.trx))
    if (!record) throw notFound('The batch')
    const before = effectiveOf(record, m.now)
    await requireAmender(m, ctx.principal, before, body.field)
    const to = await requireChange(m, body, before, id)
    const at = Math.max(m.now, (record.amendments.at(-1)?.at ?? 0) + 1)
    const clash = await clashOfBooth(m, body.field, record, { from: before.current.boothId, to })
    const amended = { ...record, amendments: [...record.amendments, { field: body.field, to, at, clashes: clash !== null }] }
    const change: Change = { field: body.field, record, amended, before, after: effectiveOf(amended, m.now), pot }
    await requireTrue(m, body.field, record, before, change.after)
    const approvalId = await requireApproval(m, change, body.approvals)
    const amendmentId = newId()
    const from = before.values.get(body.field) ?? null
    await insertAmendment({ id: amendmentId, batchId: id, field: body.field, from, to, reason: body.reason, userId, approvalId, at, clash }, m.trx)
    const moves = await write(m, change, userId)
    const values = isFreeText(body.field) ? {} : { from, to }
    m.audit({
      action: 'batch.amended', subject: `batch:${id}`,
      facts: {
        amendmentId, field: body.field, ...values, approvalId, moves: moves.map(({ lotId, grams }) => ({ lotId, grams })),
        endsAt: change.after.current.endsAt, state: change.after.current.state, review: change.after.openReview,
      },
    })
    await publishPot(m, id)
    return potAnswer(m, id)
  })
}

/** What must not meet in the booth to which a pot is put right: it was sprayed there, so it is kept and marked. */
async function clashOfBooth(m: Mutation, field: string, record: BatchOnRecord, { from, to }: { from: string | null; to: string | null }): Promise<BoothClash | null> {
  if (field !== 'boothId' || record.outcome === 'stopped') return null
  await lockBooths([from, to], m.trx)
  return clashAt(m, to, record.snapshot.mix, record.mixedAt)
}

/** @throws Refusal 409 with what holds now when `from` does not, 400 for a value of another form, 422 for the same value */
async function requireChange(m: Mutation, { field, from, to: wanted }: AmendmentBody, before: EffectiveBatch, id: string): Promise<string | null> {
  const to = checkedValue(field, wanted)
  const now = before.values.get(field) ?? null
  if (plainValue(field, now) !== plainValue(field, from)) {
    throw new Refusal(409, 'changed', 'This value was changed meanwhile.', [{ path: 'from', message: 'This is not what it is now.' }], { current: await findBatch(id, m.trx) })
  }
  if (plainValue(field, now) === to) throw ruleBroken('nothing-changed', 'That is what it says already.', [{ path: 'to', message: 'That is what it says already.' }])
  return to
}

/** What a foreman has to sign: a pot that lives longer, a lot that must not be used. */
async function neededApprovals(m: Mutation, { field, record, before, after }: Change): Promise<Signing[]> {
  const lotId = pourFieldOf(field)?.what === 'lotId' ? after.values.get(field) : null
  if (lotId) {
    const { faults, lot } = await requireLot(m, field, record, lotId)
    return faults.map((fault) => ({ ...signingOf(fault, lot), subject: `lot:${lotId}` }))
  }
  const later = (now: number | null, then: number | null) => then !== null && (now === null || now > then)
  const longer = later(after.current.endsAt, before.current.endsAt) || later(after.current.reactiveAt, before.current.reactiveAt)
  return longer ? [{ action: 'late-reactive-at', subject: `batch:${record.id}`, message: 'That would lengthen the pot\'s life. A foreman has to approve it.' }] : []
}

/** @returns the approval that was used, or null where none was needed. @throws Refusal 422 `approval-needed` */
async function requireApproval(m: Mutation, change: Change, offered: readonly string[]): Promise<string | null> {
  const needed = await neededApprovals(m, change)
  if (needed.length === 0) return null
  const open = await lockOpenApprovals(offered, m.now, m.trx)
  const used = needed.map(({ action, subject, message }) => {
    const approval = open.find((one) => one.action === action && one.subject === subject)
    if (approval) return approval.id
    throw new Refusal(422, 'approval-needed', message, [{ path: 'to', message }], { approval: { action, subject } })
  })
  await useApprovals(used, m.now, m.trx)
  return used[0] ?? null
}

/** Brings everything that follows in agreement with the amendment. @returns what was moved between lots */
async function write(m: Mutation, { field, record, amended, before, after, pot }: Change, userId: string): Promise<Compensation[]> {
  const moves = pourFieldOf(field) ? movesOf(before, after) : []
  await lockLots(moves.map(({ lotId }) => lotId), m.trx)
  await lockBooths([before.current.boothId, after.current.boothId], m.trx)
  await rewriteCurrent(after.current, m.now, m.trx)
  if (pourFieldOf(field)) {
    await rewriteUses({ batchId: record.id, mixedAt: record.mixedAt, usedIds: usedIdsOf(record, after) }, m.trx)
    const stock = await compensateLots(moves, record.id, userId, toInstant(m.now), (lotId) => toInstant(firstPourOf(after, lotId)), m.trx)
    m.publish({ type: 'stock', subject: `batch:${record.id}`, boothId: null, payload: { lots: stock } })
  }
  await compensateWaste(m, record, before, after, userId)
  await moveTimers(m, before, after, pot)
  await moveSprays(m, amended, before, after)
  return moves
}

/** When a batch first took from a lot, epoch milliseconds. */
const firstPourOf = ({ facts, current }: EffectiveBatch, lotId: string): number =>
  Math.min(...facts.pours.filter((pour) => pour.lotId === lotId).map(({ at }) => at), current.mixedAt)

/** What lies in the index of the log for a batch. */
export const usedIdsOf = (record: BatchOnRecord, { facts }: EffectiveBatch): string[] =>
  [...facts.pours.map(({ lotId }) => lotId), ...record.components.map(({ materialId }) => materialId)]

/** Grams that each lot gets back, or gives after all. */
function movesOf(before: EffectiveBatch, after: EffectiveBatch): Compensation[] {
  const taken = ({ facts }: EffectiveBatch, lotId: string) => sum(facts.pours.filter((pour) => pour.lotId === lotId).map(({ grams }) => new D(grams)))
  const lotIds = [...new Set([...before.facts.pours, ...after.facts.pours].map(({ lotId }) => lotId))].sort()
  return lotIds.map((lotId) => ({ lotId, grams: print(taken(before, lotId).minus(taken(after, lotId))) })).filter(({ grams }) => grams !== '0')
}

/** Waste is insert-only too: the difference is booked. All of a stopped mix is waste. */
async function compensateWaste(m: Mutation, record: BatchOnRecord, before: EffectiveBatch, after: EffectiveBatch, userId: string): Promise<void> {
  const stopped = record.outcome === 'stopped'
  const wasted = ({ current }: EffectiveBatch) => new D((stopped ? current.pouredTotalG : current.leftoverG) ?? '0')
  const grams = wasted(after).minus(wasted(before))
  if (grams.eq(0)) return
  const chemistry = baseChemistryOf(record.snapshot.mix.components)
  const named = stopped ? record.snapshot.stopped?.disposal : after.current.disposal
  await insertWaste({
    batchId: record.id, kind: stopped ? 'stopped-mix' : 'leftover', chemistry,
    grams: print(grams), disposal: named ?? disposalFor(chemistry ?? 'unknown', after.current.reactiveAt !== null).key, reason: null, userId, at: toInstant(m.now),
  }, m.trx)
}

/** A pot that still stands rings by its new instants, in its new booth. */
async function moveTimers(m: Mutation, before: EffectiveBatch, after: EffectiveBatch, pot: CurrentBatch): Promise<void> {
  const { batchId, state, boothId, lateAt, endsAt } = after.current
  if (!['fresh', 'closing', 'life-up', 'no-pot-life'].includes(state)) return
  if (before.current.lateAt === lateAt && before.current.endsAt === endsAt && before.current.boothId === boothId) return
  if (lateAt === null || endsAt === null) await cancelTimers(m, 'batch', batchId)
  else await setPotTimers(m, { batchId, boothId, label: `${pot.code} ${pot.mixName}`.slice(0, 160), lateAt, endsAt })
}

/** The coats that the pot laid, their windows and the air of its booth follow what is known of its sprays. */
async function moveSprays(m: Mutation, amended: BatchOnRecord, before: EffectiveBatch, after: EffectiveBatch): Promise<void> {
  const [was, is] = [before.current, after.current]
  await moveWindows(m, await rewriteCoats(m, amended, after))
  const changed = was.boothId !== is.boothId || was.firstSprayAt !== is.firstSprayAt || was.lastSprayAt !== is.lastSprayAt || was.closedAt !== is.closedAt
  if (!changed) return
  if (is.closedAt === null) {
    if (was.boothId !== is.boothId) m.publish({ type: 'window', subject: `batch:${amended.id}`, boothId: was.boothId, payload: null })
    await publishUnended(m, amended.id, is.boothId)
  }
  const { containsIsocyanates } = await findPotContent(amended.id, m.trx)
  if (!containsIsocyanates) return
  for (const boothId of new Set([was.boothId, is.boothId])) if (boothId !== null) await resettleShots(m, boothId)
}
