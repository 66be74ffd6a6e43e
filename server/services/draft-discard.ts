import { D, sum } from '#shared/engine/decimal'
import type { Draft, DraftDiscardBody } from '#shared/schemas/drafts'
import { endDraft, lockDraft, type StoredDraft } from '../repositories/drafts'
import { insertVoidedNumbers } from '../repositories/number-blocks'
import { userIdOf, type Context } from '../utils/context'
import { notFound, Refusal, ruleBroken } from '../utils/errors'
import { mutateUnlessDone } from '../utils/settled'
import { mayHold, takenOver } from './draft-holder'
import { getDraft } from './drafts'
import { requireMixer } from './mixers'
import { publishPot } from './pot-view'
import { cancelTimers } from './timers'

/**
 * Ends a draft into whose cup nothing came: no batch of nothing enters the record, its number is voided with the
 * reason and never used again. Discarding twice answers the draft.
 *
 * @throws Refusal 404 without a draft, 403 for another person's, 409 `already-sealed`, 409 `taken-over`, 422 `something-poured`
 */
export function discardDraft(ctx: Context, id: string, { reason, holder = null }: DraftDiscardBody): Promise<Draft> {
  return mutateUnlessDone<Draft>(ctx, async (m, keep) => {
    const draft = await lockDraft(id, m.trx)
    if (!draft) throw notFound('The draft')
    await requireMixer(ctx.principal, draft.mixedByUserId, draft.mixedByUserId, m.trx)
    if (draft.state === 'discarded') keep(() => getDraft(ctx, id))
    if (draft.state !== 'open') throw new Refusal(409, 'already-sealed', 'This batch is in the log already.', [], { current: await getDraft({ db: m.trx }, id) })
    if (!mayHold(draft.body.holder, holder)) throw await takenOver(draft, await getDraft({ db: m.trx }, id), m.trx)
    if (inCup(draft).gt(0)) throw ruleBroken('something-poured', 'Something is in this cup: stop it, so that it is logged as waste.')
    const number = numberOf(draft.code)
    await cancelTimers(m, 'batch', id)
    await endDraft(id, 'discarded', m.now, m.trx)
    await insertVoidedNumbers({ series: 'batch', numbers: [number], reason, userId: userIdOf(ctx.principal) }, m.now, m.trx)
    m.audit({ action: 'draft.discarded', subject: `batch:${id}`, facts: { code: draft.code, seq: draft.seq, number, mixedByUserId: draft.mixedByUserId } })
    await publishPot(m, id)
    return getDraft({ db: m.trx }, id)
  })
}

const inCup = ({ body }: StoredDraft) => sum(body.components.flatMap(({ pours }) => pours.map(({ grams }) => new D(grams))))

/** The number of a code as the series gave it. */
const numberOf = (code: string): number => Number(/\d+$/.exec(code)?.[0])
