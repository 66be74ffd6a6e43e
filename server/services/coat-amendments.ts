import { latestShot } from '#shared/utils/pot-sprays'
import { listCoatsOf, rewriteCoat, type CoatOnRecord, type EffectiveCoat } from '../repositories/application-current'
import type { BatchOnRecord } from '../repositories/batch-record'
import { findJobStep, type JobStep } from '../repositories/draft-references'
import { findOpenGuns } from '../repositories/open-guns'
import { findWindows } from '../repositories/windows'
import type { Mutation } from '../utils/transactions'
import type { EffectiveBatch } from './batch-effective'
import { windowAfter } from './coat-windows'
import { earliestShot, windowLabel } from './coats'
import { cancelTimers, reviveWindowsUnder, setWindowTimers } from './timers'

/** A coat whose moments, booth or window an amendment of its batch changed. */
export interface MovedCoat {
  id: string
  label: string
  before: EffectiveCoat
  after: EffectiveCoat
}

/** The latest shot that was noted of a pot, and the latest that its guns which nobody ended can have made. */
interface Shots {
  notedAt: number[]
  latestAt: number | null
}

/**
 * Brings the coats that a batch laid in agreement with its effective values: first and last spray, booth, and the
 * window that follows from them.
 *
 * @returns those that changed
 */
export async function rewriteCoats(m: Mutation, record: BatchOnRecord, { current }: EffectiveBatch): Promise<MovedCoat[]> {
  const coats = await listCoatsOf(record.id, m.trx)
  const [first] = coats
  if (!first) return []
  // A batch is for one step of a job, so all its coats are too.
  const step = await findJobStep(first.jobStepId, m.trx)
  if (!step) throw new Error('the step of a coat was lost')
  const shots: Shots = {
    notedAt: record.events.flatMap(({ kind, at }) => (kind === 'last-spray' ? [at] : [])),
    latestAt: current.closedAt === null ? null : latestShot(await findOpenGuns([record.id], m.trx), current.closedAt),
  }
  const moved: MovedCoat[] = []
  for (const [place, coat] of coats.entries()) {
    const after = record.amendments.length === 0 ? coat.recorded : effectiveCoat(coat, step, { current, shots, isLast: place === coats.length - 1 })
    if (isSame(coat.now, after)) continue
    await rewriteCoat(coat.id, after, m.now, m.trx)
    moved.push({ id: coat.id, label: windowLabel(step, coat.coatNumber), before: coat.now, after })
  }
  return moved
}

interface Facts {
  current: EffectiveBatch['current']
  shots: Shots
  /** False for a coat that the same pot went on with later. */
  isLast: boolean
}

function effectiveCoat(coat: CoatOnRecord, step: JobStep, { current, shots, isLast }: Facts): EffectiveCoat {
  const lastAt = lastOf(coat, { current, shots, isLast })
  // What nobody noted stays on the careful side: the window closes by it.
  const first = coat.firstAssumed ? earliestShot(current) : current.firstSprayAt ?? coat.recorded.firstAt
  const firstAt = Math.min(first, lastAt)
  const opened = windowAfter(step, coat.coatNumber, firstAt, lastAt)
  const window = opened && { opensAt: opened.window.opensAt, closingAt: opened.window.closingAt, closesAt: opened.window.closesAt }
  return { firstAt, lastAt, boothId: current.boothId, window }
}

function lastOf({ recorded, lastAssumed }: CoatOnRecord, { current, shots, isLast }: Facts): number {
  if (lastAssumed) return Math.max(shots.latestAt ?? recorded.lastAt, ...shots.notedAt)
  const now = current.lastSprayAt ?? recorded.lastAt
  return isLast ? now : Math.min(recorded.lastAt, now)
}

const isSame = (a: EffectiveCoat, b: EffectiveCoat): boolean =>
  a.firstAt === b.firstAt && a.lastAt === b.lastAt && a.boothId === b.boothId && a.window?.opensAt === b.window?.opensAt
  && a.window?.closingAt === b.window?.closingAt && a.window?.closesAt === b.window?.closesAt

/** An instant that had passed before and still has is over: it does not ring again, unless its booth never heard it. */
function instantsToSet(before: EffectiveCoat, after: EffectiveCoat, window: NonNullable<EffectiveCoat['window']>, now: number) {
  const toSet = (then: number | null | undefined, at: number | null): number | null => {
    const isOver = at !== null && at <= now && then !== null && then !== undefined && then <= now
    return isOver && before.boothId === after.boothId ? null : at
  }
  return {
    opensAt: toSet(before.window?.opensAt, window.opensAt), closingAt: toSet(before.window?.closingAt, window.closingAt),
    closesAt: toSet(before.window?.closesAt, window.closesAt),
  }
}

/** Moves the timers of windows that still count, and tells the screens of both booths. */
export async function moveWindows(m: Mutation, moved: readonly MovedCoat[]): Promise<void> {
  for (const { id, label, before, after } of moved) {
    // The booth that it was thought to be of shows it no more; its own shows it after that.
    if (before.boothId !== after.boothId) m.publish({ type: 'window', subject: `application:${id}`, boothId: before.boothId, payload: null })
    const [counts] = after.window === null ? [] : await findWindows({ applicationId: id }, m.trx)
    if (after.window !== null && counts) await setWindowTimers(m, { applicationId: id, boothId: after.boothId, label, ...instantsToSet(before, after, after.window, m.now) })
    else await cancelTimers(m, 'application', id)
    if (before.firstAt !== after.firstAt) await reviveWindowsUnder(m, id)
  }
}
