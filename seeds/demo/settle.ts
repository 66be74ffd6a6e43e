import { findDue } from '../../server/repositories/due-timers'
import { findWindows } from '../../server/repositories/windows'
import { getBatch } from '../../server/services/batches'
import { settleDue } from '../../server/services/due-timers'
import { settleReview } from '../../server/services/reviews'
import { acknowledgeTimer, cancelTimers } from '../../server/services/timers'
import type { Context } from '../../server/utils/context'
import { mutate } from '../../server/utils/transactions'

const page = 200

/** Lets every timer ring that is due, or those of one pot. */
export async function settleDueTimers(ctx: Context, batchId?: string): Promise<void> {
  const own = batchId === undefined ? null : new Set((await ctx.db('timers').where('subject_id', batchId).select<{ id: string }[]>('id')).map(({ id }) => id))
  for (;;) {
    const due = (await findDue(await ctx.clock.now(ctx.db), page, ctx.db)).filter(({ id }) => own === null || own.has(id))
    for (const work of due) await settleDue(ctx, work)
    if (due.length < page) return
  }
}

/** Ends the timers of windows that nobody waits for any more: the next coat is on, or the job is done. */
export async function endPastWindows(ctx: Context): Promise<void> {
  const waiting = await ctx.db('timers').where({ subject_type: 'application', state: 'waiting' }).distinct<{ subject_id: string }[]>('subject_id')
  const open = new Set((await findWindows({}, ctx.db)).map(({ id }) => id))
  const ended = waiting.map(({ subject_id: id }) => id).filter((id) => !open.has(id))
  if (ended.length === 0) return
  await mutate(ctx, async (m) => {
    for (const id of ended) await cancelTimers(m, 'application', id)
    m.audit({ action: 'windows.ended', subject: 'settings:shop', facts: { applications: ended } })
  })
}

/** The foreman has seen which windows were missed: those pieces are sanded again. */
export async function acknowledgeMissed(ctx: Context): Promise<void> {
  const missed = await ctx.db('timers').where({ kind: 'window-closes', state: 'fired' }).select<{ id: string }[]>('id')
  for (const { id } of missed) await acknowledgeTimer(ctx, id)
}

/** The foreman has looked at whatever waits for him. */
export async function settleReviews(ctx: Context): Promise<void> {
  const open = await ctx.db('batch_current').where('review_open', true).orderBy('mixed_at').select<{ batch_id: string }[]>('batch_id')
  for (const { batch_id: id } of open) {
    const { openReview } = await getBatch(ctx, id)
    await settleReview(ctx, id, { codes: openReview, reason: 'Test panel hard after a week, accepted.' })
  }
}
