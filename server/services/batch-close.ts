import { D } from '#shared/engine/decimal'
import type { Batch, BatchCloseBody } from '#shared/schemas/batches'
import { disposalFor } from '#shared/utils/disposal'
import { gunSprays, latestShot, sprayedSpan, type GunSpray } from '#shared/utils/pot-sprays'
import { updateCurrent, type CurrentBatch, type CurrentChange } from '../repositories/batch-current'
import { insertBatchEvent, insertWaste } from '../repositories/batches'
import { lockBooths } from '../repositories/booth-locks'
import { findOpenGuns } from '../repositories/open-guns'
import { findPotContent, listSprays, type PotContent } from '../repositories/sprays'
import { userIdOf, type Context } from '../utils/context'
import { toInstant } from '../utils/rows'
import { mutate, type Mutation } from '../utils/transactions'
import { usedOf } from './batch-effective'
import { noteShot } from './booth-air'
import { earliestShot, writeCoat } from './coats'
import { notAfter } from './device-clock'
import { actorOf, broken, lockPot, potAnswer, taken } from './pot-lock'
import { publishPot } from './pot-view'
import { cancelTimers } from './timers'

/**
 * A pot is empty: its timers end, what was left is waste, and what it coated is written even where nobody noted the
 * last spray. Nothing lengthens a pot's life, and nothing closes it twice.
 *
 * @throws Refusal 404 (also for another booth's screen), 409 `not-sealed`, `stopped` or `already-closed`,
 * 422 for more left than was mixed, or a moment before the mix or before a spray
 */
export function closeBatch(ctx: Context, id: string, body: BatchCloseBody): Promise<Batch> {
  return mutate(ctx, async (m) => {
    const pot = await lockPot(ctx, m, id)
    if (pot.state === 'stopped') throw await taken(m, id, 'stopped', 'This mix was stopped and is waste already.')
    if (pot.state === 'emptied') throw await taken(m, id, 'already-closed', 'This pot was emptied before.')
    const at = body.at === null ? m.now : notAfter(body.at, m.now)
    const guns = gunSprays(await listSprays([id], m.trx))
    const told = body.lastSprayAt ? notAfter(body.lastSprayAt, m.now) : null
    refuseClosing(pot, body.leftoverG, guns, { at, told })
    const content = await findPotContent(id, m.trx)
    const disposal = body.disposal ?? disposalFor(content.chemistry, pot.reactiveAt !== null).key
    const weighed = body.leftoverG !== null
    if (content.containsIsocyanates) await lockBooths([pot.boothId], m.trx)
    const ending = endingOf(pot, body, guns, { at, told, latestAt: latestShot(await findOpenGuns([id], m.trx), at) })
    const details = { leftoverG: body.leftoverG, weighed, disposal, ...(ending?.assumed ? { lastSprayAssumed: true } : {}) }
    await updateCurrent(id, {
      ...changeBy(pot, ending, guns), state: 'emptied', closedAt: at, leftoverG: body.leftoverG, leftoverWeighed: weighed, disposal,
    }, m.now, m.trx)
    await insertBatchEvent({ ...actorOf(ctx), batchId: id, kind: 'emptied', at: toInstant(at), gunId: null, boothId: pot.boothId, details, createdAt: toInstant(m.now) }, m.trx)
    await bookLeftover(ctx, m, id, content, { leftoverG: body.leftoverG, disposal, at })
    await cancelTimers(m, 'batch', id)
    const applicationId = ending ? await endSpraying(ctx, m, pot, guns, ending) : null
    if (pot.boothId !== null && content.containsIsocyanates) await noteShot(m, pot.boothId, ending?.at ?? null)
    m.audit({ action: 'batch.emptied', subject: `batch:${id}`, facts: { at, before: pot.state, applicationId, ...details } })
    await publishPot(m, id)
    return potAnswer(m, id)
  })
}

/** When it was emptied, and the last spray where it is told with it. Epoch milliseconds. */
interface Moments {
  at: number
  told: number | null
}

/** With the latest that it can have been sprayed where nobody tells. */
interface EndMoments extends Moments {
  latestAt: number
}

function refuseClosing(pot: CurrentBatch, leftoverG: string | null, guns: readonly GunSpray[], { at, told }: Moments): void {
  if (leftoverG !== null && new D(leftoverG).gt(pot.pouredTotalG)) throw broken('leftover-over-poured', 'leftoverG', 'More cannot be left than was mixed.')
  if (at < pot.mixedAt) throw broken('before-mixed', 'at', 'That is before it was mixed.')
  const shots = guns.flatMap(({ firstAt, lastAt }) => [firstAt ?? 0, lastAt ?? 0])
  if (at < Math.max(...shots, 0)) throw broken('before-last-spray', 'at', 'That is before its last spray.')
  if (told === null) return
  if (told > at) throw broken('after-emptied', 'lastSprayAt', 'That is after the pot was emptied.')
  if (told < earliestShot(pot)) throw broken('before-mixed', 'lastSprayAt', 'That is before it was mixed.')
  if (sprayedSpan(guns).unended.some(({ firstAt }) => firstAt !== null && told < firstAt)) {
    throw broken('spray-reversed', 'lastSprayAt', 'That is before the first spray.')
  }
}

/** A last spray that was not noted before: told now, or assumed at the latest that it can have been. */
interface Ending {
  at: number
  assumed: boolean
  /** Guns that it ends; the planned one where no shot was noted at all. */
  gunIds: (string | null)[]
}

/**
 * @returns null where everything was noted, or nothing of the pot was sprayed: because somebody says so, or because all
 * of it is left
 */
function endingOf(pot: CurrentBatch, body: BatchCloseBody, guns: readonly GunSpray[], { told, latestAt }: EndMoments): Ending | null {
  const { unended, lastAt } = sprayedSpan(guns)
  if (unended.length === 0 && lastAt !== null) return null
  const allLeft = body.leftoverG !== null && new D(body.leftoverG).eq(pot.pouredTotalG)
  if (unended.length === 0 && (body.sprayed === false || (body.sprayed === undefined && told === null && allLeft))) return null
  const gunIds = unended.length > 0 ? unended.map(({ gunId }) => gunId) : [pot.gunId]
  return told === null ? { at: latestAt, assumed: true, gunIds } : { at: told, assumed: false, gunIds }
}

/** What was told is noted as any last spray; what is only assumed stands in the coat and not in the pot's own times. */
function changeBy(pot: CurrentBatch, ending: Ending | null, guns: readonly GunSpray[]): Pick<CurrentChange, 'lastSprayAt' | 'used'> {
  if (!ending || ending.assumed) return {}
  const lastSprayAt = Math.max(ending.at, ...guns.flatMap(({ lastAt }) => lastAt ?? []))
  return { lastSprayAt, used: usedOf(pot, lastSprayAt) }
}

async function endSpraying(ctx: Context, m: Mutation, pot: CurrentBatch, guns: readonly GunSpray[], ending: Ending): Promise<string | null> {
  if (!ending.assumed) {
    for (const gunId of ending.gunIds) {
      await insertBatchEvent({
        ...actorOf(ctx), batchId: pot.id, kind: 'last-spray', at: toInstant(ending.at), gunId, boothId: pot.boothId, details: { toldAtEmptying: true },
        createdAt: toInstant(m.now),
      }, m.trx)
    }
  }
  const { firstSprayAt: firstAt } = pot
  const lastAt = Math.max(ending.at, ...guns.flatMap((gun) => gun.lastAt ?? []))
  return writeCoat(ctx, m, pot, {
    gunId: ending.gunIds.at(-1) ?? null, firstAt: firstAt ?? Math.min(earliestShot(pot), lastAt), lastAt, firstAssumed: firstAt === null, lastAssumed: ending.assumed,
  })
}

async function bookLeftover(
  ctx: Context, m: Mutation, batchId: string, { chemistry }: PotContent, left: { leftoverG: string | null; disposal: string; at: number },
): Promise<void> {
  if (left.leftoverG !== null && new D(left.leftoverG).eq(0)) return
  await insertWaste({
    batchId, kind: 'leftover', chemistry, grams: left.leftoverG, disposal: left.disposal, reason: null, userId: userIdOf(ctx.principal), at: toInstant(left.at),
  }, m.trx)
}
