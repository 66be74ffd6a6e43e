import type { Batch, BatchEventBody } from '#shared/schemas/batches'
import { gunSprays, type GunSpray } from '#shared/utils/pot-sprays'
import type { CurrentBatch, CurrentChange } from '../repositories/batch-current'
import { updateCurrent } from '../repositories/batch-current'
import { readRecord, type BatchOnRecord } from '../repositories/batch-record'
import { insertBatchEvent } from '../repositories/batches'
import { lockBooths } from '../repositories/booth-locks'
import { isThere } from '../repositories/draft-references'
import { findPotsInGun, type PotInGun } from '../repositories/open-guns'
import { standsUntil } from '../repositories/pots'
import { findPotContent, listSprays, type PotContent, type SprayEvent } from '../repositories/sprays'
import type { Context } from '../utils/context'
import { invalid } from '../utils/errors'
import { toInstant } from '../utils/rows'
import { mutate, type Mutation } from '../utils/transactions'
import { effectiveOf, type EffectiveBatch } from './batch-effective'
import { noteShot } from './booth-air'
import { moveWindows, rewriteCoats } from './coat-amendments'
import { earliestShot, writeCoat, type CoatMoments } from './coats'
import { notAfter } from './device-clock'
import { actorOf, broken, lockPot, potAnswer, taken } from './pot-lock'
import { publishPot } from './pot-view'
import { publishUnended } from './windows'

/**
 * First or last spray of one gun from a pot, or that gun flushed, at the bench or at the booth's screen. Where the last
 * gun ends, a pot that belongs to a job's step writes the coat and starts its window.
 *
 * @throws Refusal 404 (also for another booth's screen), 409 `not-sealed`, `stopped` or `already-recorded` (by this gun),
 * 422 for a moment before the mix or in the wrong order
 */
export function recordBatchEvent(ctx: Context, id: string, body: BatchEventBody): Promise<Batch> {
  return mutate(ctx, async (m) => {
    const pot = await lockPot(ctx, m, id)
    if (pot.state === 'stopped') throw await taken(m, id, 'stopped', 'This mix was stopped. It is not sprayed.')
    const gunId = body.gunId ?? pot.gunId
    if (body.gunId !== null && !(await isThere('guns', body.gunId, m.trx))) throw invalid([{ path: 'gunId', message: 'There is no such gun.' }])
    const at = body.at === null ? m.now : notAfter(body.at, m.now)
    const content = await findPotContent(id, m.trx)
    const before = await listSprays([id], m.trx)
    await refuseShot(m, pot, { kind: body.kind, gunId, at }, gunSprays(before))
    const leftIn = body.kind === 'first-spray' && gunId !== null ? await findPotsInGun(gunId, { at, except: id }, m.trx) : []
    await lockBooths([content.containsIsocyanates || leftIn.length > 0 ? pot.boothId : null, ...leftIn.map(({ boothId }) => boothId)], m.trx)
    const early = body.kind === 'first-spray' ? earlyOf(pot, content, at) : {}
    await insertBatchEvent({ ...actorOf(ctx), batchId: id, kind: body.kind, at: toInstant(at), gunId, boothId: pot.boothId, details: early, createdAt: toInstant(m.now) }, m.trx)
    const settled = await settleSprays(ctx, m, pot, [...before, { batchId: id, kind: body.kind, gunId, gunName: null, at }], body.kind)
    if (pot.boothId !== null && content.containsIsocyanates) await noteShot(m, pot.boothId, body.kind === 'first-spray' ? null : at)
    await endInOtherPots(m, leftIn, at)
    m.audit({ action: `batch.${body.kind}`, subject: `batch:${id}`, facts: { at, gunId, ...settled, ...early } })
    await publishPot(m, id)
    return potAnswer(m, id)
  })
}

/** What the pot is after a shot: its span over all guns, and the coat where the last gun has ended. */
async function settleSprays(
  ctx: Context, m: Mutation, pot: CurrentBatch, events: readonly SprayEvent[], kind: BatchEventBody['kind'],
): Promise<{ applicationId: string | null; used: CurrentChange['used'] }> {
  // What was put right by an amendment stands over what was tapped before it.
  const { record, effective } = await effectiveNow(m, pot.id)
  const { firstSprayAt, lastSprayAt, used } = effective.current
  await updateCurrent(pot.id, { ...(firstSprayAt === null ? {} : { firstSprayAt }), lastSprayAt, used }, m.now, m.trx)
  const isCoat = kind === 'last-spray' && lastSprayAt !== null
  const applicationId = isCoat ? await writeCoat(ctx, m, pot, momentsOf(pot, gunSprays(events), { firstSprayAt, lastAt: lastSprayAt })) : null
  if (kind !== 'gun-flushed' && !isCoat) await publishUnended(m, pot.id, pot.boothId)
  // Coats that were put right are known anew where another gun goes on with the pot.
  if (record.amendments.length > 0) await moveWindows(m, await rewriteCoats(m, record, effective))
  return { applicationId, used }
}

/** The careful side where nobody noted the first spray: the window closes by it. */
function momentsOf(pot: CurrentBatch, guns: readonly GunSpray[], { firstSprayAt, lastAt }: { firstSprayAt: number | null; lastAt: number }): CoatMoments {
  return {
    gunId: lastGunOf(guns), firstAt: firstSprayAt ?? Math.min(earliestShot(pot), lastAt), lastAt, firstAssumed: firstSprayAt === null, lastAssumed: false,
  }
}

async function effectiveNow(m: Mutation, id: string): Promise<{ record: BatchOnRecord; effective: EffectiveBatch }> {
  const record = await readRecord(id, m.trx)
  if (!record) throw new Error('the record of a batch was lost')
  return { record, effective: effectiveOf(record, m.now) }
}

/** The gun that sprayed last. */
function lastGunOf(guns: readonly GunSpray[]): string | null {
  return guns.reduce<GunSpray | null>((last, gun) => (gun.lastAt !== null && gun.lastAt >= (last?.lastAt ?? 0) ? gun : last), null)?.gunId ?? null
}

/** One gun holds one pot: what it was loaded from before, it has sprayed by `at` at the latest, noted or not. */
async function endInOtherPots(m: Mutation, pots: readonly PotInGun[], at: number): Promise<void> {
  for (const { batchId, boothId } of pots) {
    await publishUnended(m, batchId, boothId)
    const { containsIsocyanates } = await findPotContent(batchId, m.trx)
    if (boothId !== null && containsIsocyanates) await noteShot(m, boothId, at)
  }
}

/** Spraying before the standing time of the sheet is over is a fact and is kept as such. */
function earlyOf(pot: CurrentBatch, { inductionMin }: PotContent, at: number): { beforeStood?: true; standsUntil?: number } {
  const until = standsUntil(pot.mixedAt, inductionMin)
  return until !== null && at < until ? { beforeStood: true, standsUntil: until } : {}
}

interface Shot {
  kind: BatchEventBody['kind']
  gunId: string | null
  at: number
}

/** Each gun sprays a pot once from its first to its last shot. */
async function refuseShot(m: Mutation, pot: CurrentBatch, { kind, gunId, at }: Shot, guns: readonly GunSpray[]): Promise<void> {
  if (at < earliestShot(pot)) throw broken('before-mixed', 'at', 'That is before it was mixed.')
  const gun = guns.find((one) => one.gunId === gunId)
  if (kind === 'gun-flushed') {
    if (gun?.flushedAt) throw await taken(m, pot.id, 'already-recorded', 'This gun was flushed already.')
    return
  }
  if (pot.closedAt !== null && at > pot.closedAt) throw broken('after-emptied', 'at', 'That is after the pot was emptied.')
  if (kind === 'first-spray') {
    if (gun?.firstAt) throw await taken(m, pot.id, 'already-recorded', 'The first spray of this gun is recorded already.')
    if (gun?.lastAt && at > gun.lastAt) throw broken('spray-reversed', 'at', 'That is after the last spray.')
    return
  }
  if (gun?.lastAt) throw await taken(m, pot.id, 'already-recorded', 'The last spray of this gun is recorded already.')
  if (gun?.firstAt && at < gun.firstAt) throw broken('spray-reversed', 'at', 'That is before the first spray.')
}
