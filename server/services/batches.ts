import type { Batch, BatchCreateInput } from '#shared/schemas/batches'
import { disposalFor } from '#shared/utils/disposal'
import { audienceOf } from '../live/audience'
import { insertCurrent } from '../repositories/batch-current'
import { findBatch } from '../repositories/batch-page'
import { insertUses } from '../repositories/batch-uses'
import { insertBatch, insertWaste, type PourRecord } from '../repositories/batches'
import { startJobStep } from '../repositories/draft-references'
import { endDraft, lockDraft, type StoredDraft } from '../repositories/drafts'
import { drawFromLots, findStockLots, openLots } from '../repositories/lot-stock'
import type { MixRevision } from '../repositories/mix-revisions'
import type { Context } from '../utils/context'
import { notFound, Refusal, ruleBroken } from '../utils/errors'
import { toInstant } from '../utils/rows'
import { mutateUnlessDone } from '../utils/settled'
import type { Mutation } from '../utils/transactions'
import { clashAt } from './booth-guard'
import { baseChemistryOf, judgeBatch, potLives, potTimesOf, reactiveByPours, wasCorrected } from './batch-sums'
import { notAfter } from './device-clock'
import { mayHold, takenOver } from './draft-holder'
import { lotIdsOf, readReferences } from './draft-references'
import { refuseImpossible } from './draft-rules'
import { potLabel, readDraft } from './drafts'
import { requireMixer } from './mixers'
import { potAnswer } from './pot-lock'
import { publishPot } from './pot-view'
import { componentsOf, deviationOf, drawnOf, mixedAtOf, poursOf, recordOf, reviewOf, sealedState, type Sealing } from './seal-facts'
import { cancelTimers, setPotTimers } from './timers'

/**
 * Seals a draft into the record: reckons everything again, moves the stock, starts the job's step. What is in the cup
 * is a fact and is stored whatever rule it broke; `review` tells a foreman. Sealing twice answers the batch.
 *
 * @throws Refusal 404 without a draft, 403 for another person's, 409 `taken-over` for a tablet that holds it no more, 422 `nothing-poured` and for what cannot be true
 */
export function sealBatch(ctx: Context, { draftId, holder = null }: BatchCreateInput): Promise<Batch> {
  return mutateUnlessDone<Batch>(ctx, async (m, keep) => {
    const draft = await lockDraft(draftId, m.trx)
    if (!draft) throw notFound('The draft')
    await requireMixer(ctx.principal, draft.mixedByUserId, draft.mixedByUserId, m.trx)
    if (draft.state === 'discarded') throw new Refusal(409, 'discarded', 'This draft was discarded.')
    if (draft.state !== 'open') keep(() => getBatch(ctx, draftId))
    // Who names no tablet is none that could have been taken over from.
    if (holder !== null && !mayHold(draft.body.holder, holder)) throw await takenOver(draft, await readDraft(draftId, m.trx), m.trx)
    const sealing = await readSealing(m, draft)
    const pours = poursOf(sealing)
    if (pours.length === 0 && !draft.body.stopped) throw ruleBroken('nothing-poured', 'Nothing was poured into this cup yet.')
    await writeBatch(m, sealing, pours)
    await publishPot(m, draftId, { fresh: true })
    return potAnswer(m, draftId, { fresh: true })
  })
}

async function readSealing(m: Mutation, draft: StoredDraft): Promise<Sealing> {
  const lots = await findStockLots(lotIdsOf(draft.body), m.trx, { hold: true })
  const references = await readReferences(draft.body, m.trx, lots)
  refuseImpossible(draft.body, references)
  const { revision, scale } = references
  const mixedAt = mixedAtOf({ draft, now: m.now }, poursOf({ draft, now: m.now }))
  const reactiveAt = draft.reactiveAt ?? (potLives(revision) ? reactiveByPours(revision, draft.body, m.now) : null)
  return {
    draft: { ...draft, body: { ...draft.body, stopped: disposedOf(draft, revision, reactiveAt) } },
    references,
    sums: judgeBatch(revision, draft.body, scale),
    times: potTimesOf(revision, draft.body, reactiveAt),
    reactiveAt,
    clash: draft.body.stopped ? null : await clashAt(m, draft.body.boothId, revision, mixedAt),
    now: m.now,
    zone: references.zone,
  }
}

/** How a stopped mix was stopped, with its way out of the shop: the one that was named, else the one of its chemistry. */
function disposedOf({ body }: StoredDraft, { components }: MixRevision, reactiveAt: number | null): StoredDraft['body']['stopped'] {
  return body.stopped && { ...body.stopped, disposal: body.stopped.disposal || disposalFor(baseChemistryOf(components) ?? 'unknown', reactiveAt !== null).key }
}

async function writeBatch(m: Mutation, sealing: Sealing, pours: readonly PourRecord[]): Promise<void> {
  const { draft, references, sums, times } = sealing
  const { body } = draft
  const mixedAt = mixedAtOf(sealing, pours)
  const review = reviewOf(sealing, pours, mixedAt)
  const state = sealedState(sealing)
  const drawn = drawnOf(pours)
  await insertBatch(recordOf(sealing, review, mixedAt), componentsOf(sealing), pours, body.pieceIds, m.trx)
  await insertCurrent({
    batchId: draft.id,
    state,
    mixedAt,
    boothId: body.boothId,
    reactiveAt: sealing.reactiveAt,
    lateAt: times?.lateAt ?? null,
    endsAt: times?.endsAt ?? null,
    closedAt: body.stopped ? notAfter(body.stopped.at, m.now) : null,
    jobId: references.jobStep?.jobId ?? null,
    mixedByUserId: body.mixedByUserId,
    gunId: body.gunId,
    purpose: body.purpose,
    pouredTotalG: sums.pouredTotalG,
    worstDeviationPct: deviationOf(sums.worstDeviationPct),
    worstRole: sums.worstRole,
    outOfTolerance: !body.stopped && sums.outOfTolerance,
    corrected: wasCorrected(body.corrections, pours, componentsOf(sealing)),
    reviewOpen: review.length > 0,
  }, m.now, m.trx)
  await insertUses({
    batchId: draft.id, mixedAt, usedIds: [...pours.map(({ lotId }) => lotId), ...references.revision.components.map(({ materialId }) => materialId)],
  }, m.trx)
  await openLots(drawn.filter(({ lotId }) => references.lots.get(lotId)?.state === 'sealed'), toInstant(m.now), m.trx)
  const stock = await drawFromLots(drawn, draft.id, body.mixedByUserId, toInstant(m.now), m.trx)
  await (body.stopped ? endStopped(m, sealing) : startPot(m, sealing))
  await endDraft(draft.id, body.stopped ? 'stopped' : 'sealed', m.now, m.trx)
  m.audit({
    action: body.stopped ? 'batch.stopped' : 'batch.sealed',
    subject: `batch:${draft.id}`,
    facts: {
      code: draft.code, seq: draft.seq, state, review, mixRevisionId: references.revision.id, mixedByUserId: body.mixedByUserId, mixedAt,
      reactiveAt: sealing.reactiveAt, endsAt: times?.endsAt ?? null, targetTotalG: sums.plan.targetTotalG, pouredTotalG: sums.pouredTotalG,
      drawn: drawn.map(({ lotId, grams }) => ({ lotId, grams })),
    },
  })
  m.publish({ type: 'stock', subject: `batch:${draft.id}`, boothId: null, payload: { lots: stock } })
}

async function startPot(m: Mutation, { draft, references, times }: Sealing): Promise<void> {
  if (times) {
    const label = potLabel(draft.code, references.revision)
    await setPotTimers(m, { batchId: draft.id, boothId: draft.body.boothId, label, lateAt: times.lateAt, endsAt: times.endsAt })
  }
  if (references.jobStep) await startJobStep(references.jobStep.id, toInstant(m.now), m.trx)
}

/** A mix that was stopped is waste: it is booked as such and rings no more. */
async function endStopped(m: Mutation, { draft, references, sums }: Sealing): Promise<void> {
  const { stopped, mixedByUserId } = draft.body
  if (!stopped) return
  await cancelTimers(m, 'batch', draft.id)
  if (sums.pouredTotalG === '0') return
  const { components } = references.revision
  await insertWaste({
    batchId: draft.id,
    kind: 'stopped-mix',
    chemistry: baseChemistryOf(components),
    grams: sums.pouredTotalG,
    disposal: stopped.disposal,
    reason: stopped.reason,
    userId: mixedByUserId,
    at: toInstant(notAfter(stopped.at, m.now)),
  }, m.trx)
}

/** Everything about one batch. @throws Refusal 404, also for a screen that asks for another booth's */
export async function getBatch(ctx: Pick<Context, 'db' | 'principal'>, id: string): Promise<Batch> {
  const batch = await findBatch(id, ctx.db)
  const { boothId } = audienceOf(ctx.principal, undefined)
  if (!batch || (boothId !== null && batch.boothId !== boothId)) throw notFound('The batch')
  return batch
}
