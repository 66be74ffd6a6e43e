import { batchPieceIds, coatsOn, insertCoat } from '../repositories/applications'
import type { CurrentBatch } from '../repositories/batch-current'
import { findJobStep, lockJobStep, pieceIdsOf, type JobStep } from '../repositories/draft-references'
import { startJob } from '../repositories/jobs'
import { userIdOf, type Context } from '../utils/context'
import { newId } from '../utils/ids'
import type { Mutation } from '../utils/transactions'
import { windowAfter } from './coat-windows'
import { endWindowsUnder, setWindowTimers } from './timers'
import { publishUnended } from './windows'

/** When a coat was sprayed, epoch milliseconds. What nobody noted is assumed on the careful side, and says so. */
export interface CoatMoments {
  gunId: string | null
  firstAt: number
  lastAt: number
  firstAssumed: boolean
  lastAssumed: boolean
}

/** The earliest that a pot can have been sprayed: the window of what it coated closes by it. */
export const earliestShot = ({ reactiveAt, mixedAt }: Pick<CurrentBatch, 'reactiveAt' | 'mixedAt'>): number => Math.min(reactiveAt ?? mixedAt, mixedAt)

/**
 * Writes the coat that a pot laid, starts its window, and the job with its first coat.
 *
 * @returns the application's id, or null for a loose mix
 */
export async function writeCoat(ctx: Context, m: Mutation, pot: CurrentBatch, moments: CoatMoments): Promise<string | null> {
  const step = pot.jobStepId === null ? null : await findJobStep(pot.jobStepId, m.trx)
  if (!step) return null
  const named = await batchPieceIds(pot.id, m.trx)
  // Without chosen pieces the pot was for all of the job.
  const pieceIds = named.length > 0 ? named : await pieceIdsOf(step.jobId, m.trx)
  // Coats on the same pieces are counted one after the other, or two pots would write the same coat.
  await lockJobStep(step.id, m.trx)
  const before = await coatsOn(step.id, pieceIds, pot.planId, m.trx)
  const coatNumber = Math.min(before + (pot.coats ?? 1), 255)
  const { firstAt, lastAt, gunId, firstAssumed, lastAssumed } = moments
  const opened = windowAfter(step, coatNumber, firstAt, lastAt)
  const id = newId()
  await insertCoat({
    id, jobId: step.jobId, jobStepId: step.id, coatNumber, face: step.faces, firstAt, lastAt, lastAssumed, boothId: pot.boothId, gunId,
    userId: userIdOf(ctx.principal), window: opened?.window ?? null, pieceIds, batchIds: [pot.id],
    details: { firstAssumed, lastAssumed, purpose: opened?.purpose ?? null, empty: opened?.window.empty ?? null },
  }, m.now, m.trx)
  await startJob(step.jobId, m.now, m.trx)
  if (opened) await setWindowTimers(m, { applicationId: id, boothId: pot.boothId, label: windowLabel(step, coatNumber), ...instantsOf(opened.window) })
  else await endWindowsUnder(m, id)
  await publishUnended(m, pot.id, pot.boothId)
  return id
}

const instantsOf = ({ opensAt, closingAt, closesAt }: { opensAt: number; closingAt: number | null; closesAt: number | null }) => ({ opensAt, closingAt, closesAt })

/** What an alarm calls the window of a coat. */
export const windowLabel = ({ jobCode, title, coats }: JobStep, coatNumber: number): string =>
  `${jobCode} ${title}${coats > 1 ? `, coat ${coatNumber}` : ''}`.slice(0, 160)
