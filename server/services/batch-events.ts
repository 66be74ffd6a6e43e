import { D } from '#shared/engine/decimal'
import type { Batch, BatchCloseBody, BatchEventBody } from '#shared/schemas/batches'
import { batchPieceIds, coatsOn, insertCoat } from '../repositories/applications'
import { lockCurrent, updateCurrent, type CurrentBatch, type CurrentChange } from '../repositories/batch-current'
import { findBatch } from '../repositories/batch-page'
import { insertBatchEvent, insertWaste } from '../repositories/batches'
import { findJobStep, isThere, lockJobStep, pieceIdsOf, type JobStep } from '../repositories/draft-references'
import { findDraft } from '../repositories/drafts'
import { userIdOf, type Context } from '../utils/context'
import { invalid, notFound, Refusal, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { toInstant } from '../utils/rows'
import { mutate, type Mutation } from '../utils/transactions'
import { windowAfter } from './coat-windows'
import { notAfter } from './device-clock'
import { publishPot } from './pot-view'
import { cancelTimers, endWindowsUnder, setWindowTimers } from './timers'

/**
 * First or last spray from a pot, at the bench or at the booth's screen. The last spray of a pot that belongs to a
 * job's step writes the coat and starts its window.
 *
 * @throws Refusal 404 (also for another booth's screen), 409 `not-sealed`, `stopped` or `already-recorded`,
 * 422 for a moment before the mix or in the wrong order
 */
export function recordBatchEvent(ctx: Context, id: string, body: BatchEventBody): Promise<Batch> {
  return mutate(ctx, async (m) => {
    const pot = await lockPot(ctx, m, id)
    if (pot.state === 'stopped') throw await taken(m, id, 'stopped', 'This mix was stopped. It is not sprayed.')
    const gunId = body.gunId ?? pot.gunId
    if (body.gunId !== null && !(await isThere('guns', body.gunId, m.trx))) throw invalid([{ path: 'gunId', message: 'There is no such gun.' }])
    const at = body.at === null ? m.now : notAfter(body.at, m.now)
    const change = await changeBySpray(m, pot, body.kind, at)
    await updateCurrent(id, change, m.now, m.trx)
    await insertBatchEvent({ ...actor(ctx), batchId: id, kind: body.kind, at: toInstant(at), gunId, boothId: pot.boothId, details: {}, createdAt: toInstant(m.now) }, m.trx)
    const applicationId = body.kind === 'last-spray' ? await writeCoat(ctx, m, pot, gunId, at) : null
    m.audit({ action: `batch.${body.kind}`, subject: `batch:${id}`, facts: { at, gunId, applicationId, used: change.used ?? null } })
    await publishPot(m, id)
    return answer(m, id)
  })
}

/**
 * A pot is empty: its timers end, what was left is waste. Nothing lengthens a pot's life, and nothing closes it twice.
 *
 * @throws Refusal 404 (also for another booth's screen), 409 `not-sealed`, `stopped` or `already-closed`,
 * 422 for more left than was mixed or a moment before the mix or the last spray
 */
export function closeBatch(ctx: Context, id: string, body: BatchCloseBody): Promise<Batch> {
  return mutate(ctx, async (m) => {
    const pot = await lockPot(ctx, m, id)
    if (pot.state === 'stopped') throw await taken(m, id, 'stopped', 'This mix was stopped and is waste already.')
    if (pot.state === 'emptied') throw await taken(m, id, 'already-closed', 'This pot was emptied before.')
    if (body.leftoverG !== null && new D(body.leftoverG).gt(pot.pouredTotalG)) throw broken('leftover-over-poured', 'leftoverG', 'More cannot be left than was mixed.')
    const at = body.at === null ? m.now : notAfter(body.at, m.now)
    if (at < pot.mixedAt) throw broken('before-mixed', 'at', 'That is before it was mixed.')
    if (pot.lastSprayAt !== null && at < pot.lastSprayAt) throw broken('before-last-spray', 'at', 'That is before its last spray.')
    const disposal = body.disposal ?? (pot.reactiveAt === null ? 'solvent waste' : 'reactive waste')
    const weighed = body.leftoverG !== null
    await updateCurrent(id, { state: 'emptied', closedAt: at, leftoverG: body.leftoverG, leftoverWeighed: weighed, disposal }, m.now, m.trx)
    const details = { leftoverG: body.leftoverG, weighed, disposal }
    await insertBatchEvent({ ...actor(ctx), batchId: id, kind: 'emptied', at: toInstant(at), gunId: null, boothId: pot.boothId, details, createdAt: toInstant(m.now) }, m.trx)
    await bookLeftover(ctx, m, id, body.leftoverG, disposal, at)
    await cancelTimers(m, 'batch', id)
    m.audit({ action: 'batch.emptied', subject: `batch:${id}`, facts: { at, before: pot.state, ...details } })
    await publishPot(m, id)
    return answer(m, id)
  })
}

const actor = ({ principal }: Context) => ({ userId: userIdOf(principal), deviceId: principal.device?.id ?? null })

/** The pot, locked. A booth's screen knows the pots of its own booth only. */
async function lockPot(ctx: Context, m: Mutation, id: string): Promise<CurrentBatch> {
  const pot = await lockCurrent(id, m.trx)
  const { principal } = ctx
  const screenOf = principal.kind === 'device' && principal.device.kind === 'screen' ? principal.device.boothId : undefined
  if (!pot) {
    const draft = await findDraft(id, m.trx)
    if (!draft || (screenOf !== undefined && draft.body.boothId !== screenOf)) throw notFound('The pot')
    throw new Refusal(409, 'not-sealed', 'This pot is still being made at the bench. Finish it there first.')
  }
  if (screenOf !== undefined && pot.boothId !== screenOf) throw notFound('The pot')
  return pot
}

async function answer(m: Mutation, id: string): Promise<Batch> {
  const batch = await findBatch(id, m.trx)
  if (!batch) throw new Error('a batch was lost in its own transaction')
  return batch
}

const taken = async (m: Mutation, id: string, code: string, message: string) =>
  new Refusal(409, code, message, [], { current: await answer(m, id) })

const broken = (code: string, path: string, message: string) => ruleBroken(code, message, [{ path, message }])

async function changeBySpray(m: Mutation, pot: CurrentBatch, kind: BatchEventBody['kind'], at: number): Promise<CurrentChange> {
  const { firstSprayAt, lastSprayAt, mixedAt, reactiveAt, closedAt } = pot
  if (at < Math.min(mixedAt, reactiveAt ?? mixedAt)) throw broken('before-mixed', 'at', 'That is before it was mixed.')
  if (closedAt !== null && at > closedAt) throw broken('after-emptied', 'at', 'That is after the pot was emptied.')
  if (kind === 'first-spray') {
    if (firstSprayAt !== null) throw await taken(m, pot.id, 'already-recorded', 'The first spray is recorded already.')
    if (lastSprayAt !== null && at > lastSprayAt) throw broken('spray-reversed', 'at', 'That is after the last spray.')
    return { firstSprayAt: at }
  }
  if (lastSprayAt !== null) throw await taken(m, pot.id, 'already-recorded', 'The last spray is recorded already.')
  if (firstSprayAt !== null && at < firstSprayAt) throw broken('spray-reversed', 'at', 'That is before the first spray.')
  return { lastSprayAt: at, used: usedOf(pot, at) }
}

/** Whether the pot was still good at its last spray; null where it has no pot life. */
function usedOf({ lateAt, endsAt }: CurrentBatch, lastSprayAt: number): CurrentChange['used'] {
  if (lateAt === null || endsAt === null) return null
  if (lastSprayAt > endsAt) return 'past-life'
  return lastSprayAt > lateAt ? 'late' : 'in-time'
}

/** @returns the application's id, or null for a loose mix */
async function writeCoat(ctx: Context, m: Mutation, pot: CurrentBatch, gunId: string | null, lastAt: number): Promise<string | null> {
  const step = pot.jobStepId === null ? null : await findJobStep(pot.jobStepId, m.trx)
  if (!step) return null
  const named = await batchPieceIds(pot.id, m.trx)
  // Without chosen pieces the pot was for all of the job.
  const pieceIds = named.length > 0 ? named : await pieceIdsOf(step.jobId, m.trx)
  // Coats on the same pieces are counted one after the other, or two pots would write the same coat.
  await lockJobStep(step.id, m.trx)
  const before = await coatsOn(step.id, pieceIds, pot.planId, m.trx)
  const coatNumber = Math.min(before + (pot.coats ?? 1), 255)
  // The careful side where nobody tapped the first spray: the window closes by it.
  const firstAt = pot.firstSprayAt ?? Math.min(pot.reactiveAt ?? pot.mixedAt, pot.mixedAt, lastAt)
  const opened = windowAfter(step, coatNumber, firstAt, lastAt)
  const id = newId()
  await insertCoat({
    id, jobId: step.jobId, jobStepId: step.id, coatNumber, face: step.faces, firstAt, lastAt, boothId: pot.boothId, gunId,
    userId: userIdOf(ctx.principal), window: opened?.window ?? null, pieceIds, batchIds: [pot.id],
    details: { firstAssumed: pot.firstSprayAt === null, purpose: opened?.purpose ?? null, empty: opened?.window.empty ?? null },
  }, m.now, m.trx)
  if (opened) await setWindowTimers(m, { applicationId: id, boothId: pot.boothId, label: windowLabel(step, coatNumber), ...instantsOf(opened.window) })
  else await endWindowsUnder(m, id)
  return id
}

const instantsOf = ({ opensAt, closingAt, closesAt }: { opensAt: number; closingAt: number | null; closesAt: number | null }) => ({ opensAt, closingAt, closesAt })

const windowLabel = ({ jobCode, title, coats }: JobStep, coatNumber: number): string =>
  `${jobCode} ${title}${coats > 1 ? `, coat ${coatNumber}` : ''}`.slice(0, 160)

async function bookLeftover(ctx: Context, m: Mutation, id: string, leftoverG: string | null, disposal: string, at: number): Promise<void> {
  if (leftoverG !== null && new D(leftoverG).eq(0)) return
  const batch = await answer(m, id)
  await insertWaste({
    batchId: id, kind: 'leftover', chemistry: batch.chemistry, grams: leftoverG, disposal, reason: null, userId: userIdOf(ctx.principal), at: toInstant(at),
  }, m.trx)
}
