import type { LiveBooth } from '#shared/schemas/live'
import type { BoothExtractionBody } from '#shared/schemas/shop'
import { lockBooths } from '../repositories/booth-locks'
import { findClearanceFacts, insertExtractionChange, lockExtraction, noteIsocyanateShot } from '../repositories/clearance'
import { findLastIsocyanateShot, putIsocyanateShot } from '../repositories/isocyanate-shots'
import { setTimers } from '../repositories/timers'
import { userIdOf, type Context } from '../utils/context'
import { notFound, ruleBroken } from '../utils/errors'
import { mutate, type Mutation } from '../utils/transactions'
import { liveBooth, publishBooth } from './booth-view'
import { judgeClearance } from './clearance'
import { notAfter } from './device-clock'
import { cancelTimers } from './timers'

/**
 * Brings the booth's clearance timer to what the shots and the extraction say, and tells the screens. Call it after
 * everything that changes one of them. It holds the booth, so that two who settle it follow each other; who has written
 * rows that refer to the booth by then has locked it before.
 */
export async function settleClearance(m: Mutation, boothId: string): Promise<void> {
  await lockBooths([boothId], m.trx)
  const [facts] = await findClearanceFacts(boothId, m.trx)
  if (!facts) return
  const clearance = judgeClearance(facts, m.now)
  if (clearance?.state === 'counting' && clearance.clearAt !== null) {
    const label = `${facts.boothName}: clear of isocyanates`
    await setTimers([{ kind: 'clearance', subjectType: 'booth', subjectId: boothId, boothId, label, dueAt: Date.parse(clearance.clearAt) }], m.now, m.trx)
  } else {
    await cancelTimers(m, 'booth', boothId)
  }
  await publishBooth(m, boothId)
}

/** What a pot did to the air of its booth: a shot of isocyanates, or cleaning the gun after it, at `at`. */
export async function noteShot(m: Mutation, boothId: string, at: number | null): Promise<void> {
  await lockBooths([boothId], m.trx)
  if (at !== null) await noteIsocyanateShot(boothId, at, m.trx)
  await settleClearance(m, boothId)
}

/** Reckons the last shot of isocyanates in a booth again, after what is known of one of its pots was put right. */
export async function resettleShots(m: Mutation, boothId: string): Promise<void> {
  await lockBooths([boothId], m.trx)
  await putIsocyanateShot(boothId, await findLastIsocyanateShot(boothId, m.trx), m.trx)
  await settleClearance(m, boothId)
}

/**
 * Notes whether a booth's extraction runs. A clearance count rests while it does not, and begins anew when it does.
 *
 * @throws Refusal 404, 422 `changes-order` for a moment not after the last change
 */
export function setExtraction(ctx: Context, boothId: string, body: BoothExtractionBody): Promise<LiveBooth> {
  return mutate(ctx, async (m) => {
    const booth = await lockExtraction(boothId, m.trx)
    if (!booth) throw notFound('The booth')
    const at = body.at === null ? m.now : notAfter(body.at, m.now)
    if (booth.changedAt !== null && at <= booth.changedAt) {
      const message = 'That is not after the extraction last changed.'
      throw ruleBroken('changes-order', message, [{ path: 'at', message }])
    }
    if (body.state !== booth.extraction) {
      await insertExtractionChange({ boothId, extraction: body.state, before: booth.extraction, at, userId: userIdOf(ctx.principal) }, m.now, m.trx)
    }
    m.audit({ action: 'booth.extraction', subject: `booth:${boothId}`, facts: { before: booth.extraction, after: body.state, at } })
    await settleClearance(m, boothId)
    return liveBooth(boothId, m.now, m.trx)
  })
}
