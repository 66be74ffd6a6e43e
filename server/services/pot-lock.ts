import type { Batch } from '#shared/schemas/batches'
import { lockCurrent, type CurrentBatch } from '../repositories/batch-current'
import { findBatch } from '../repositories/batch-page'
import { findDraft } from '../repositories/drafts'
import { userIdOf, type Context } from '../utils/context'
import { notFound, Refusal, ruleBroken } from '../utils/errors'
import type { Mutation } from '../utils/transactions'

/** Who did something to a pot: a person, a device, or a person at a device. */
export const actorOf = ({ principal }: Context) => ({ userId: userIdOf(principal), deviceId: principal.device?.id ?? null })

/**
 * The pot, locked. A booth's screen knows the pots of its own booth only.
 *
 * @throws Refusal 404, 409 `not-sealed` while it is being mixed
 */
export async function lockPot(ctx: Context, m: Mutation, id: string): Promise<CurrentBatch> {
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

/** The batch as this transaction leaves it. @param options.fresh it was sealed in this transaction */
export async function potAnswer(m: Mutation, id: string, options: { fresh?: boolean } = {}): Promise<Batch> {
  const batch = await findBatch(id, m.trx, options)
  if (!batch) throw new Error('a batch was lost in its own transaction')
  return batch
}

/** 409 with the batch as it is. */
export const taken = async (m: Mutation, id: string, code: string, message: string) =>
  new Refusal(409, code, message, [], { current: await potAnswer(m, id) })

/** 422 beside a field. */
export const broken = (code: string, path: string, message: string) => ruleBroken(code, message, [{ path, message }])
