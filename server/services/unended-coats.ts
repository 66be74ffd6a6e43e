import type { Knex } from 'knex'
import { toIso } from '#shared/utils/instant'
import { latestShot } from '#shared/utils/pot-sprays'
import { batchPieceIds, coatsOn } from '../repositories/applications'
import { findJobStep, pieceIdsOf } from '../repositories/draft-references'
import { findOpenGuns } from '../repositories/open-guns'
import { listSprays } from '../repositories/sprays'
import { findUnendedCoats, pieceLabels, type UnendedCoat, type UnendedFilter } from '../repositories/unended-coats'
import type { OpenWindow } from '../repositories/windows'
import { windowAfter } from './coat-windows'

/**
 * The windows of coats whose last spray nobody noted, from the careful side at `now` (epoch milliseconds): it closes by
 * the first shot, and opens as if the last one were now, or when its gun was loaded from another pot. Their id is the
 * batch's.
 */
export async function unendedWindows(filter: UnendedFilter, now: number, db: Knex | Knex.Transaction): Promise<OpenWindow[]> {
  const windows: OpenWindow[] = []
  for (const coat of await findUnendedCoats(filter, db)) {
    const window = await windowOf(coat, now, db)
    if (window) windows.push(window)
  }
  return windows
}

async function windowOf(coat: UnendedCoat, now: number, db: Knex | Knex.Transaction): Promise<OpenWindow | null> {
  const step = await findJobStep(coat.jobStepId, db)
  if (!step) return null
  const named = await batchPieceIds(coat.batchId, db)
  const pieceIds = named.length > 0 ? named : await pieceIdsOf(coat.jobId, db)
  const coatNumber = await coatsOn(coat.jobStepId, pieceIds, coat.planId, db) + coat.coats
  const { lastAt, moves } = await lastOf(coat, now, db)
  const opened = windowAfter(step, coatNumber, coat.firstAt, lastAt)
  if (!opened) return null
  const { opensAt, closingAt, closesAt } = opened.window
  return {
    id: coat.batchId, jobId: coat.jobId, jobCode: coat.jobCode, jobTitle: coat.jobTitle, jobStepId: coat.jobStepId, stepTitle: coat.stepTitle,
    stepPosition: coat.stepPosition, pieces: await pieceLabels(pieceIds, db), pieceIds, boothId: coat.boothId, boothName: coat.boothName,
    firstAt: toIso(coat.firstAt), lastAt: toIso(lastAt), opensAt: toIso(opensAt), closingAt: closingAt === null ? null : toIso(closingAt),
    closesAt: closesAt === null ? null : toIso(closesAt), assumed: true,
    unended: moves ? { minMs: opened.minMs, maxMs: opened.maxMs } : null,
  }
}

/** The latest last shot that is possible, and whether it moves on with time because a gun may still spray. */
async function lastOf(coat: UnendedCoat, now: number, db: Knex | Knex.Transaction): Promise<{ lastAt: number; moves: boolean }> {
  const open = await findOpenGuns([coat.batchId], db)
  const shots = await listSprays([coat.batchId], db)
  const noted = shots.filter(({ kind }) => kind === 'last-spray').map(({ at }) => at)
  return { lastAt: Math.max(latestShot(open, now), coat.firstAt, ...noted), moves: open.some(({ movedOnAt }) => movedOnAt === null) }
}
