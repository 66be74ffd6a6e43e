import type { Timer } from '#shared/schemas/timers'
import { claimDue, type DueWork } from '../repositories/due-timers'
import { advancePotState, lockPotFate, type PotFate } from '../repositories/pot-state'
import { getTimer, updateTimer } from '../repositories/timers'
import { findWindows } from '../repositories/windows'
import type { Context } from '../utils/context'
import { mutate, type Mutation } from '../utils/transactions'
import { publishBooth } from './booth-view'
import { publishPot } from './pot-view'
import { publishTimer } from './timers'
import { publishWindow } from './windows'

/** Another process was faster, or somebody ended the timer meanwhile: the transaction is given up. */
class NotOurs extends Error {}

/**
 * Does what is due for one timer, in a transaction of its own: once, whatever the number of processes that try.
 *
 * @returns false when another process did it or it is not due any more
 */
export async function settleDue(ctx: Context, work: DueWork): Promise<boolean> {
  try {
    await mutate(ctx, async (m) => {
      // The pot before its timer, as everybody takes them.
      const fate = work.action === 'fire' ? await potFate(m, work.id) : null
      if (!(await claimDue(work, m.now, m.trx))) throw new NotOurs()
      const timer = await getTimer(work.id, m.trx)
      if (!timer) throw new NotOurs()
      await settle[work.action](m, timer, fate)
      return null
    })
    return true
  } catch (error) {
    if (error instanceof NotOurs) return false
    throw error
  }
}

/** Holds the pot that a timer is about; null where it is about something else. */
async function potFate(m: Mutation, timerId: string): Promise<PotFate | null> {
  const timer = await getTimer(timerId, m.trx)
  return timer?.subjectType === 'batch' ? await lockPotFate(timer.subjectId, m.trx) : null
}

const settle: Record<DueWork['action'], (m: Mutation, timer: Timer, fate: PotFate | null) => Promise<void>> = { fire, announce, unmute }

async function fire(m: Mutation, timer: Timer, fate: PotFate | null): Promise<void> {
  if (!(await isStillAbout(m, timer, fate))) {
    await updateTimer(timer.id, { state: 'cancelled' }, m.now, m.trx)
    audit(m, timer, 'timer.cancelled')
    await publishTimer(m, timer.id)
    return
  }
  await updateTimer(timer.id, { state: 'fired', firedAt: m.now, announcedAt: m.now }, m.now, m.trx)
  if (timer.kind === 'pot-late') await advancePotState(timer.subjectId, 'closing', m.now, m.trx)
  if (timer.kind === 'pot-up') await advancePotState(timer.subjectId, 'life-up', m.now, m.trx)
  audit(m, timer, 'timer.fired')
  await publishTimer(m, timer.id)
  if (timer.subjectType === 'batch') await publishPot(m, timer.subjectId)
  if (timer.subjectType === 'application') await publishWindow(m, timer.subjectId, timer.boothId)
  if (timer.subjectType === 'booth') await publishBooth(m, timer.subjectId)
}

/** False when what the timer was set for has ended without it having been told. */
async function isStillAbout(m: Mutation, timer: Timer, fate: PotFate | null): Promise<boolean> {
  if (timer.subjectType === 'batch') return fate !== 'over'
  if (timer.subjectType === 'application') return (await findWindows({ applicationId: timer.subjectId }, m.trx)).length > 0
  return true
}

async function announce(m: Mutation, timer: Timer): Promise<void> {
  await updateTimer(timer.id, { announcedAt: m.now }, m.now, m.trx)
  audit(m, timer, 'timer.announced')
  await publishTimer(m, timer.id)
}

async function unmute(m: Mutation, timer: Timer): Promise<void> {
  await updateTimer(timer.id, { state: 'fired', announcedAt: m.now, silencedUntil: null, silencedBy: null, silencedReason: null }, m.now, m.trx)
  audit(m, timer, 'timer.unmuted')
  await publishTimer(m, timer.id)
  await publishPot(m, timer.subjectId)
}

function audit(m: Mutation, timer: Timer, action: string): void {
  m.audit({ action, subject: `timer:${timer.id}`, facts: { kind: timer.kind, about: `${timer.subjectType}:${timer.subjectId}`, dueAt: timer.dueAt } })
}
