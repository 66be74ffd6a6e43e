import type { Batch, BatchReviewBody } from '#shared/schemas/batches'
import { lockCurrent, rewriteCurrent } from '../repositories/batch-current'
import { findBatch } from '../repositories/batch-page'
import { readRecord } from '../repositories/batch-record'
import { insertBatchEvent } from '../repositories/batches'
import { userIdOf, type Context } from '../utils/context'
import { notFound, Refusal } from '../utils/errors'
import { toInstant } from '../utils/rows'
import { mutate } from '../utils/transactions'
import { effectiveOf } from './batch-effective'
import { potAnswer } from './pot-lock'
import { publishPot } from './pot-view'

/**
 * A foreman has looked at what a batch was marked for. The codes stay on the record; the reason stands beside them.
 *
 * @throws Refusal 404, 409 `not-open` with what the batch is now when one of the codes is not open
 */
export function settleReview(ctx: Context, id: string, { codes, reason }: BatchReviewBody): Promise<Batch> {
  return mutate(ctx, async (m) => {
    const pot = await lockCurrent(id, m.trx)
    const record = pot && (await readRecord(id, m.trx))
    if (!record) throw notFound('The batch')
    const { openReview } = effectiveOf(record, m.now)
    const settled = [...new Set(codes)]
    if (settled.some((code) => !openReview.includes(code))) {
      throw new Refusal(409, 'not-open', 'This was settled before.', [{ path: 'codes', message: 'This was settled before.' }], { current: await findBatch(id, m.trx) })
    }
    const at = toInstant(m.now)
    const details = { codes: settled, reason }
    await insertBatchEvent({ batchId: id, kind: 'review-settled', at, userId: userIdOf(ctx.principal), deviceId: ctx.principal.device?.id ?? null, gunId: null, boothId: pot.boothId, details, createdAt: at }, m.trx)
    const after = effectiveOf({ ...record, events: [...record.events, { kind: 'review-settled', at: m.now, notedAt: m.now, gunId: null, details }] }, m.now)
    await rewriteCurrent(after.current, m.now, m.trx)
    m.audit({ action: 'batch.review-settled', subject: `batch:${id}`, facts: { codes: settled, left: after.openReview } })
    await publishPot(m, id)
    return potAnswer(m, id)
  })
}
