import type { Timer, TimerCreateBody, TimerExtendBody, TimerSilenceBody } from '#shared/schemas/timers'
import { findTimerOf, getTimer, lockTimer, lockTimersOf, setTimers, timedApplicationsUnder, untimedApplicationsUnder, updateTimer, type TimerChange } from '../repositories/timers'
import { activeName } from '../repositories/people-names'
import { findWindows } from '../repositories/windows'
import type { Context, Principal } from '../utils/context'
import { userIdOf } from '../utils/context'
import { forbidden, invalid, notFound, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { mutate, type Mutation } from '../utils/transactions'
import { isActive } from '../repositories/devices'
import { publishPot } from './pot-view'
import { publishWindow } from './windows'

const minuteMs = 60_000

/** How long a silenced alarm keeps quiet. */
export const silenceMs = 10 * minuteMs

/** Tells the screens what the timer is now, as this transaction leaves it. */
export async function publishTimer(m: Mutation, id: string): Promise<Timer> {
  const timer = await getTimer(id, m.trx)
  if (!timer) throw new Error('a timer was lost in its own transaction')
  m.publish({ type: 'timer', subject: `timer:${id}`, boothId: timer.boothId, payload: timer })
  return timer
}

/** A pot's two instants, epoch milliseconds. `label` is what an alarm calls it. */
export interface PotTimers {
  batchId: string
  boothId: string | null
  label: string
  lateAt: number
  endsAt: number
}

/**
 * Sets or moves the timers of a pot. What has fired stays fired unless its instant moves.
 * The caller tells the screens with `publishPot`.
 */
export async function setPotTimers(m: Mutation, pot: PotTimers): Promise<void> {
  const subject = { subjectType: 'batch', subjectId: pot.batchId, boothId: pot.boothId, label: pot.label } as const
  await setTimers([{ ...subject, kind: 'pot-late', dueAt: pot.lateAt }, { ...subject, kind: 'pot-up', dueAt: pot.endsAt }], m.now, m.trx)
}

/** Instants of the window that an application started, epoch milliseconds. Null where there is none, or nothing to set. */
export interface WindowTimers {
  applicationId: string
  boothId: string | null
  label: string
  opensAt: number | null
  closingAt: number | null
  closesAt: number | null
}

/** Sets or moves the timers of a window and tells the screens. The application's row must be there already. */
export async function setWindowTimers(m: Mutation, window: WindowTimers): Promise<void> {
  const subject = { subjectType: 'application', subjectId: window.applicationId, boothId: window.boothId, label: window.label } as const
  const instants = [['window-opens', window.opensAt], ['window-closing', window.closingAt], ['window-closes', window.closesAt]] as const
  await setTimers(instants.flatMap(([kind, dueAt]) => (dueAt === null ? [] : [{ ...subject, kind, dueAt }])), m.now, m.trx)
  await publishWindow(m, window.applicationId, window.boothId)
  await endWindowsUnder(m, window.applicationId)
}

/**
 * Ends the windows that an application used up: those of earlier coats on the same pieces, once nothing is left to do
 * to any piece of theirs. Call it for applications that start no window of their own; `setWindowTimers` does it itself.
 */
export async function endWindowsUnder(m: Mutation, applicationId: string): Promise<void> {
  for (const id of await timedApplicationsUnder(applicationId, m.trx)) {
    const [left] = await findWindows({ applicationId: id }, m.trx)
    if (left) await publishWindow(m, id, left.boothId)
    else await cancelTimers(m, 'application', id)
  }
}

/**
 * Sets the timers of windows that count again: a coat that covered them is known to have been sprayed before them. What
 * is over is not called out, except that a window closed without anybody having heard it.
 */
export async function reviveWindowsUnder(m: Mutation, applicationId: string): Promise<void> {
  const ahead = (instant: string | null) => (instant !== null && Date.parse(instant) > m.now ? Date.parse(instant) : null)
  for (const id of await untimedApplicationsUnder(applicationId, m.trx)) {
    const [window] = await findWindows({ applicationId: id }, m.trx)
    const opening = window && (await findTimerOf('window-opens', 'application', id, m.trx))
    if (!window || !opening) continue
    const isHeard = (await findTimerOf('window-closes', 'application', id, m.trx))?.firedAt != null
    const closesAt = window.closesAt === null || isHeard ? ahead(window.closesAt) : Date.parse(window.closesAt)
    await setWindowTimers(m, {
      applicationId: id, boothId: window.boothId, label: opening.label, opensAt: ahead(window.opensAt), closingAt: ahead(window.closingAt), closesAt,
    })
  }
}

/**
 * Ends every timer of a pot that was emptied, or of a window that was used or missed for good: what waited is
 * cancelled, what rang is done. Screens are told.
 */
export async function cancelTimers(m: Mutation, subjectType: Timer['subjectType'], subjectId: string): Promise<void> {
  const timers = await lockTimersOf(subjectType, subjectId, m.trx)
  for (const timer of timers) {
    await updateTimer(timer.id, { state: timer.state === 'waiting' ? 'cancelled' : 'done' }, m.now, m.trx)
    if (timer.state !== 'waiting') await publishTimer(m, timer.id)
  }
  if (subjectType === 'application') await publishWindow(m, subjectId, timers[0]?.boothId ?? null)
}

/** A timer of one's own. */
export function createTimer(ctx: Context, body: TimerCreateBody): Promise<Timer> {
  return mutate(ctx, async (m) => {
    if (body.boothId && !(await isActive('booths', body.boothId, m.trx))) {
      throw invalid([{ path: 'boothId', message: 'There is no such booth.' }])
    }
    const subjectId = newId()
    const dueAt = m.now + body.minutes * minuteMs
    await setTimers(
      [{ kind: 'free', subjectType: 'free', subjectId, boothId: body.boothId, label: body.name, dueAt, createdByUserId: userIdOf(ctx.principal) }],
      m.now,
      m.trx,
    )
    const timer = await findTimerOf('free', 'free', subjectId, m.trx)
    if (!timer) throw new Error('a timer was lost in its own transaction')
    m.audit({ action: 'timer.created', subject: `timer:${timer.id}`, facts: { minutes: body.minutes, boothId: body.boothId, dueAt } })
    return publishTimer(m, timer.id)
  })
}

/** What an alarm shows as the name of who answered it. */
const answererName = (principal: Principal): string =>
  principal.user?.name ?? principal.device?.name ?? 'Potbell'

/** A booth's screen answers for its own booth only: who silences an alarm must be able to look into the cup. */
function requireSameBooth(principal: Principal, timer: Timer): void {
  if (principal.kind !== 'device' || principal.device.kind !== 'screen') return
  const { boothId } = principal.device
  if (boothId !== null && timer.boothId !== null && timer.boothId !== boothId) {
    throw forbidden(`Silence it in ${timer.boothName ?? 'its own booth'}.`)
  }
}

interface Step {
  action: string
  facts?: Record<string, string | number | null>
  change: TimerChange
}

/** Locks the timer, asks what becomes of it, writes, audits and tells the screens. */
function changeTimer(ctx: Context, id: string, decide: (timer: Timer, now: number, trx: Mutation['trx']) => Step | Promise<Step>): Promise<Timer> {
  return mutate(ctx, async (m) => {
    const timer = await lockTimer(id, m.trx)
    if (!timer) throw notFound('The timer')
    requireSameBooth(ctx.principal, timer)
    const { action, facts, change } = await decide(timer, m.now, m.trx)
    await updateTimer(id, change, m.now, m.trx)
    m.audit({ action, subject: `timer:${id}`, facts: { kind: timer.kind, about: `${timer.subjectType}:${timer.subjectId}`, before: timer.state, ...facts } })
    const changed = await publishTimer(m, id)
    if (timer.subjectType === 'batch') await publishPot(m, timer.subjectId)
    return changed
  })
}

function requireFired(timer: Timer): void {
  if (timer.state === 'fired' || timer.state === 'acknowledged') return
  if (timer.state === 'waiting') throw ruleBroken('timer-not-fired', 'This timer has not rung yet.')
  throw ruleBroken('timer-ended', 'This timer has ended.')
}

/**
 * Who silences: the person who has signed in; on a screen where nobody has, the one who says so, or the screen itself.
 *
 * @throws Refusal 400 for somebody who does not work here, or for another person's name
 */
async function silencerName({ principal }: Context, byUserId: string | null, trx: Mutation['trx']): Promise<string> {
  if (byUserId === null || byUserId === principal.user?.id) return answererName(principal)
  if (principal.user) throw invalid([{ path: 'byUserId', message: 'You are signed in: it is silenced in your name.' }])
  const name = await activeName(byUserId, trx)
  if (name === null) throw invalid([{ path: 'byUserId', message: 'There is nobody of that name here.' }])
  return name
}

/**
 * Ten minutes of quiet, given by a named person or by a booth's screen. It acknowledges too. A pot that is still
 * not emptied sounds again afterwards.
 *
 * @throws Refusal 404, 403 from another booth's screen, 422 `timer-not-fired` or `timer-ended`, 400 for an unknown person
 */
export function silenceTimer(ctx: Context, id: string, body: TimerSilenceBody): Promise<Timer> {
  return changeTimer(ctx, id, async (timer, now, trx) => {
    requireFired(timer)
    const by = await silencerName(ctx, body.byUserId ?? null, trx)
    const until = now + silenceMs
    const change = { state: 'acknowledged', acknowledgedAt: now, acknowledgedBy: by, silencedUntil: until, silencedBy: by, silencedReason: body.reason } as const
    return { action: 'timer.silenced', facts: { until, byUserId: body.byUserId ?? userIdOf(ctx.principal) }, change }
  })
}

/**
 * Somebody has seen it: it is not called out again. What it is about goes on ringing where it hangs until it is
 * silenced or ended.
 *
 * @throws Refusal 404, 422 `timer-not-fired` or `timer-ended`
 */
export function acknowledgeTimer(ctx: Context, id: string): Promise<Timer> {
  return changeTimer(ctx, id, (timer, now) => {
    requireFired(timer)
    return { action: 'timer.acknowledged', change: { state: 'acknowledged', acknowledgedAt: now, acknowledgedBy: answererName(ctx.principal) } }
  })
}

/**
 * Gives a free timer more minutes: from its instant while it waits, from now once it has rung.
 *
 * @throws Refusal 404, 422 `timer-not-free` for a pot or window, whose time nobody can lengthen, or `timer-ended`
 */
export function extendTimer(ctx: Context, id: string, body: TimerExtendBody): Promise<Timer> {
  return changeTimer(ctx, id, (timer, now) => {
    if (timer.kind !== 'free') throw ruleBroken('timer-not-free', 'Only a timer of your own can be extended.')
    if (timer.state === 'done' || timer.state === 'cancelled') throw ruleBroken('timer-ended', 'This timer has ended.')
    const dueAt = (timer.state === 'waiting' ? Date.parse(timer.dueAt) : now) + body.minutes * minuteMs
    const quiet = { firedAt: null, announcedAt: null, silencedUntil: null, silencedBy: null, silencedReason: null, acknowledgedAt: null, acknowledgedBy: null }
    return { action: 'timer.extended', facts: { minutes: body.minutes, dueAt }, change: { ...quiet, state: 'waiting', dueAt } }
  })
}

/**
 * Ends a timer. A pot's timers end with the pot.
 *
 * @throws Refusal 404, 422 `pot-not-emptied` for a pot, `timer-ended`
 */
export function finishTimer(ctx: Context, id: string): Promise<Timer> {
  return changeTimer(ctx, id, (timer, now) => {
    if (timer.subjectType === 'batch') throw ruleBroken('pot-not-emptied', 'A pot\'s timer ends when the pot is emptied.')
    if (timer.state === 'done' || timer.state === 'cancelled') throw ruleBroken('timer-ended', 'This timer has ended.')
    const seen = timer.state === 'fired' ? { acknowledgedAt: now, acknowledgedBy: answererName(ctx.principal) } : {}
    return { action: 'timer.done', change: { ...seen, state: 'done' } }
  })
}
