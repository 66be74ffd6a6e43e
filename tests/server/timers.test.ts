import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { LivePot } from '#shared/schemas/live'
import type { Timer } from '#shared/schemas/timers'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import { readLive, readTimers } from '../../server/services/live'
import { potView } from '../../server/services/pot-view'
import { acknowledgeTimer, createTimer, extendTimer, finishTimer, silenceMs, silenceTimer } from '../../server/services/timers'
import type { Context } from '../../server/utils/context'
import { draftBody, poured } from '../factories/drafts'
import { openLiveShop, Station, type Ear, type LiveShop } from './support/live'

const minuteMs = 60_000

let live: LiveShop
let here: Station
let ear: Ear
let sprayer: Context

beforeAll(async () => { live = await openLiveShop('timers') })
beforeEach(async () => {
  here = new Station(live)
  ear = await here.listen()
  sprayer = live.as('sprayer', here.hub.wake)
})
afterEach(() => here.stop())
afterAll(() => live.drop())

const free = (name: string, minutes = 10, boothId: string | null = null) => createTimer(sprayer, { name, minutes, boothId })
const told = <T>(type: string, fits: (payload: T) => boolean) => ear.events.filter((event) => event.type === type && fits(event.payload as T))
const timerTold = (id: string, state: Timer['state']) => told<Timer>('timer', (timer) => timer.id === id && timer.state === state)
const pass = (minutes: number) => { live.time.now += minutes * minuteMs }
const audited = async (action: string, id: string) =>
  (await live.admin('audit_entries').where({ action, subject: `timer:${id}` }).select('seq')).length

/** Everything poured at one moment of the moved clock. */
const pouredAt = (at: string, grams: string[]) =>
  (poured(live.shop, grams) ?? []).map((one) => ({ ...one, pours: one.pours.map((pour) => ({ ...pour, at })) }))

/** A sealed pot with two hours of life from now. */
async function pot(): Promise<string> {
  const id = randomUUID()
  const at = new Date(live.time.now).toISOString()
  const components = pouredAt(at, ['100', '50', '20'])
  await saveDraft(sprayer, id, draftBody(live.shop, { components, reactiveAt: at, plan: { totalG: '170', scaleDivisionG: '0.1' } }))
  await sealBatch(sprayer, { draftId: id })
  return id
}

const view = async (id: string): Promise<LivePot> => {
  const found = await potView(live.db, id)
  if (!found) throw new Error('the pot is not there')
  return found
}

/** Moves the clock past the pot's end and waits until its bell rings. */
async function ring(id: string): Promise<Timer> {
  here.startTimers()
  pass(120)
  await ear.until(() => told<Timer>('timer', (timer) => timer.subjectId === id && timer.kind === 'pot-up' && timer.state === 'fired').length === 1)
  const [event] = told<Timer>('timer', (timer) => timer.subjectId === id && timer.kind === 'pot-up' && timer.state === 'fired')
  return event?.payload as Timer
}

describe('due timers', () => {
  it('fire once each when two processes run on one database', async () => {
    const other = new Station(live)
    try {
      const timers: Timer[] = []
      for (let one = 0; one < 25; one++) timers.push(await free(`Once ${one}`))
      here.startTimers()
      other.startTimers()
      pass(10)
      await ear.until(() => timers.every(({ id }) => timerTold(id, 'fired').length > 0))
      const last = await free('After all of them')
      await ear.until(() => timerTold(last.id, 'waiting').length === 1)
      expect(timers.map(({ id }) => timerTold(id, 'fired').length)).toEqual(timers.map(() => 1))
      expect(await Promise.all(timers.map(({ id }) => audited('timer.fired', id)))).toEqual(timers.map(() => 1))
    } finally {
      await other.stop()
    }
  })

  it('do not fire a moment too soon', async () => {
    const early = await free('Not yet', 10)
    const now = await free('Now', 9)
    here.startTimers()
    live.time.now += 10 * minuteMs - 1
    await ear.until(() => timerTold(now.id, 'fired').length === 1)
    expect(timerTold(early.id, 'fired')).toEqual([])
    live.time.now += 1
    await ear.until(() => timerTold(early.id, 'fired').length === 1)
  })

  it('are caught up in their order after a stop', async () => {
    const late = await free('Second', 30)
    const early = await free('First', 20)
    pass(600)
    here.startTimers()
    await ear.until(() => timerTold(late.id, 'fired').length === 1)
    const fired = told<Timer>('timer', ({ state }) => state === 'fired').map(({ payload }) => (payload as Timer).id)
    expect(fired).toEqual([early.id, late.id])
  })

  it('go on firing when the database fails for a while, and the fault is logged', async () => {
    const timer = await free('Behind a fault')
    await live.admin.raw('RENAME TABLE timers TO timers_away')
    const before = live.lines.length
    here.startTimers()
    pass(10)
    const logged = () => live.lines.slice(before).some(({ level }) => level === 'error')
    while (!logged()) await live.admin.raw('SELECT 1')
    await live.admin.raw('RENAME TABLE timers_away TO timers')
    await ear.until(() => timerTold(timer.id, 'fired').length === 1)
  })
})

describe('a pot', () => {
  it('is shown while it is being mixed, before and after its hardener', async () => {
    const id = randomUUID()
    await saveDraft(sprayer, id, draftBody(live.shop, { purpose: 'Shown' }))
    expect(await view(id)).toMatchObject({ stage: 'mixing', state: 'fresh', reactiveAt: null, endsAt: null, pouredG: '0', alarm: 'none', stepTitle: 'Sealer' })
    const at = new Date(live.time.now).toISOString()
    const components = pouredAt(at, ['100', '50'])
    await saveDraft(sprayer, id, draftBody(live.shop, { seq: 2, components, reactiveAt: at }))
    expect(await view(id)).toMatchObject({
      stage: 'mixing', state: 'fresh', pouredG: '150', reactiveAt: at, containsIsocyanates: true,
      lateAt: new Date(live.time.now + 90 * minuteMs).toISOString(), endsAt: new Date(live.time.now + 120 * minuteMs).toISOString(),
    })
    here.startTimers()
    pass(90)
    await ear.until(() => told<LivePot>('pot', (one) => one?.id === id && one.state === 'closing').length === 1)
    expect(await view(id)).toMatchObject({ stage: 'mixing', state: 'closing' })
  })

  it('becomes closing and then life up, written by the server and told to the screens', async () => {
    const id = await pot()
    expect(await view(id)).toMatchObject({ stage: 'sealed', state: 'fresh', alarm: 'none' })
    here.startTimers()
    pass(90)
    await ear.until(() => told<LivePot>('pot', (one) => one?.id === id && one.state === 'closing').length === 1)
    expect(await live.db('batch_current').where('batch_id', id).first('state')).toEqual({ state: 'closing' })
    pass(30)
    await ear.until(() => told<LivePot>('pot', (one) => one?.id === id && one.state === 'life-up').length === 1)
    expect(await live.db('batch_current').where('batch_id', id).first('state')).toEqual({ state: 'life-up' })
    expect(await view(id)).toMatchObject({ state: 'life-up', alarm: 'sounding', silencedUntil: null })
  })

  it('goes through both states in order when nothing ran meanwhile', async () => {
    const id = await pot()
    await ring(id)
    const states = told<LivePot>('pot', (one) => one?.id === id).map(({ payload }) => (payload as LivePot).state)
    expect(states.slice(-2)).toEqual(['closing', 'life-up'])
  })

  it('does not ring when it was emptied in time', async () => {
    const id = await pot()
    pass(60)
    await closeBatch(sprayer, id, { leftoverG: '10', at: new Date(live.time.now).toISOString(), disposal: 'open-metal-can', sprayed: false })
    here.startTimers()
    pass(120)
    const marker = await free('After the end', 1)
    pass(1)
    await ear.until(() => timerTold(marker.id, 'fired').length === 1)
    expect(told<Timer>('timer', (timer) => timer.subjectId === id && timer.state === 'fired')).toEqual([])
    expect(await view(id)).toMatchObject({ state: 'emptied', alarm: 'none', leftoverG: '10' })
  })
})

describe('the bell of a pot', () => {
  const announced = (id: string) => told<Timer>('timer', (timer) => timer.id === id && timer.state === 'fired').length

  it('is called out again after a minute, and after another, until somebody acknowledges it', async () => {
    const timer = await ring(await pot())
    for (const times of [2, 3]) {
      live.time.now += minuteMs
      await ear.until(() => announced(timer.id) === times)
    }
    const seen = await acknowledgeTimer(sprayer, timer.id)
    expect(seen).toMatchObject({ state: 'acknowledged', acknowledgedBy: `sprayer ${live.shop.mark}`, silencedUntil: null })
    pass(5)
    const marker = await free('Later', 1)
    pass(1)
    await ear.until(() => timerTold(marker.id, 'fired').length === 1)
    expect(announced(timer.id)).toBe(3)
  })

  it('keeps quiet for ten minutes, names who silenced it, and sounds again when the pot still stands', async () => {
    const id = await pot()
    const timer = await ring(id)
    const before = await free('Before the end of the quiet', 9)
    const screen = live.asScreen(live.shop.boothId, here.hub.wake)
    const silenced = await silenceTimer(screen, timer.id, { reason: null })
    const until = new Date(live.time.now + silenceMs).toISOString()
    expect(silenced).toMatchObject({ state: 'acknowledged', silencedUntil: until, silencedBy: `Screen ${live.shop.mark}`, acknowledgedBy: `Screen ${live.shop.mark}` })
    expect(await view(id)).toMatchObject({ state: 'life-up', alarm: 'silenced', silencedUntil: until, silencedBy: `Screen ${live.shop.mark}`, alarmTimerId: timer.id })
    live.time.now += silenceMs - 1
    await ear.until(() => timerTold(before.id, 'fired').length === 1)
    expect(announced(timer.id)).toBe(1)
    live.time.now += 1
    await ear.until(() => announced(timer.id) === 2)
    await ear.until(() => told<LivePot>('pot', (one) => one?.id === id && one.alarm === 'sounding').length === 2)
    expect(await view(id)).toMatchObject({ alarm: 'sounding', silencedUntil: null })
  })

  it('is silenced before a wall by whoever says so, and only by people of the shop', async () => {
    const timer = await ring(await pot())
    const screen = live.asScreen(live.shop.boothId, here.hub.wake)
    await expect(silenceTimer(screen, timer.id, { reason: null, byUserId: randomUUID() })).rejects.toMatchObject({ status: 400, fields: [{ path: 'byUserId' }] })
    await expect(silenceTimer(sprayer, timer.id, { reason: null, byUserId: live.shop.users.foreman })).rejects.toMatchObject({ status: 400, fields: [{ path: 'byUserId' }] })
    const silenced = await silenceTimer(screen, timer.id, { reason: null, byUserId: live.shop.users.foreman })
    expect(silenced).toMatchObject({ silencedBy: `foreman ${live.shop.mark}`, acknowledgedBy: `foreman ${live.shop.mark}` })
  })

  it('rings once over a restart at its moment', async () => {
    const id = await pot()
    const before = new Station(live)
    before.startTimers()
    await before.stop()
    const timer = await ring(id)
    expect(timerTold(timer.id, 'fired')).toHaveLength(1)
    expect(await audited('timer.fired', timer.id)).toBe(1)
  })

  it('stops for good when the pot is emptied', async () => {
    const id = await pot()
    const timer = await ring(id)
    await closeBatch(live.asScreen(live.shop.boothId, here.hub.wake), id, { leftoverG: '0', at: new Date(live.time.now).toISOString(), disposal: 'open-metal-can', sprayed: false })
    await ear.until(() => timerTold(timer.id, 'done').length === 1)
    expect((await readLive(sprayer, undefined)).alarms.map((alarm) => alarm.id)).not.toContain(timer.id)
    await expect(silenceTimer(sprayer, timer.id, { reason: null })).rejects.toMatchObject({ status: 422, code: 'timer-ended' })
  })

  it('hangs on every booth\'s screen, and only its own may silence it', async () => {
    const { boothId, otherBoothId } = live.shop
    const timer = await ring(await pot())
    const elsewhere = live.asScreen(otherBoothId)
    expect((await readLive(elsewhere, undefined)).alarms.map(({ id }) => id)).toContain(timer.id)
    await expect(silenceTimer(elsewhere, timer.id, { reason: null })).rejects.toMatchObject({ status: 403 })
    expect(await audited('timer.silenced', timer.id)).toBe(0)
    expect(await silenceTimer(live.asScreen(boothId), timer.id, { reason: 'Flushing now' })).toMatchObject({ silencedReason: 'Flushing now' })
    expect(await audited('timer.silenced', timer.id)).toBe(1)
  })

  it('keeps the words of who silenced it out of the audit', async () => {
    const timer = await ring(await pot())
    await silenceTimer(sprayer, timer.id, { reason: 'Jonas flushes his gun' })
    const [entry] = await live.admin('audit_entries').where({ action: 'timer.silenced', subject: `timer:${timer.id}` }).select<{ bytes: string }[]>('bytes')
    expect(entry?.bytes).toContain('"until"')
    expect(entry?.bytes).not.toContain('Jonas')
  })

  it('cannot be lengthened, ended by hand, or silenced before it rings', async () => {
    const id = await pot()
    const [waiting] = (await readTimers(sprayer, { kind: 'pot-up', state: 'waiting', limit: 200 })).items.filter(({ subjectId }) => subjectId === id)
    const timerId = waiting?.id ?? ''
    await expect(silenceTimer(sprayer, timerId, { reason: null })).rejects.toMatchObject({ status: 422, code: 'timer-not-fired' })
    await expect(extendTimer(sprayer, timerId, { minutes: 5 })).rejects.toMatchObject({ status: 422, code: 'timer-not-free' })
    await expect(finishTimer(sprayer, timerId)).rejects.toMatchObject({ status: 422, code: 'pot-not-emptied' })
    await expect(finishTimer(sprayer, randomUUID())).rejects.toMatchObject({ status: 404 })
  })
})

describe('a timer of one\'s own', () => {
  it('gets more minutes from its end while it waits, and from now once it has rung', async () => {
    const timer = await free('Flash off', 10)
    expect(await extendTimer(sprayer, timer.id, { minutes: 5 })).toMatchObject({ dueAt: new Date(Date.parse(timer.dueAt) + 5 * minuteMs).toISOString() })
    here.startTimers()
    pass(20)
    await ear.until(() => timerTold(timer.id, 'fired').length === 1)
    expect((await readLive(sprayer, undefined)).alarms.map(({ id }) => id)).toContain(timer.id)
    expect(await extendTimer(sprayer, timer.id, { minutes: 5 })).toMatchObject({ state: 'waiting', firedAt: null, dueAt: new Date(live.time.now + 5 * minuteMs).toISOString() })
    pass(5)
    await ear.until(() => timerTold(timer.id, 'fired').length === 2)
    expect(await finishTimer(sprayer, timer.id)).toMatchObject({ state: 'done', acknowledgedBy: `sprayer ${live.shop.mark}` })
    await expect(extendTimer(sprayer, timer.id, { minutes: 5 })).rejects.toMatchObject({ status: 422, code: 'timer-ended' })
  })

  it('needs a booth that is there', async () => {
    await expect(free('Nowhere', 10, randomUUID())).rejects.toMatchObject({ status: 400, fields: [{ path: 'boothId' }] })
  })

  it('is listed page by page in the order of its instant', async () => {
    const made: Timer[] = []
    for (const minutes of [50, 40, 60]) made.push(await free(`Paged ${minutes}`, minutes, live.shop.otherBoothId))
    const found: string[] = []
    let cursor: string | undefined
    do {
      const page = await readTimers(sprayer, { boothId: live.shop.otherBoothId, state: 'running', kind: 'free', limit: 2, cursor })
      found.push(...page.items.map(({ id }) => id))
      cursor = page.nextCursor ?? undefined
    } while (cursor)
    const mine = found.filter((id) => made.some((timer) => timer.id === id))
    expect(mine).toEqual([made[1]?.id, made[0]?.id, made[2]?.id])
    expect(new Set(found).size).toBe(found.length)
  })
})

describe('a window', () => {
  it('opens, closes in and closes by the server, and ends when the next coat is on', async () => {
    const first = await pot()
    const spray = (id: string, kind: 'first-spray' | 'last-spray') => recordBatchEvent(sprayer, id, { kind, at: new Date(live.time.now).toISOString(), gunId: null })
    await spray(first, 'first-spray')
    pass(10)
    await spray(first, 'last-spray')
    const mine = async () => (await readLive(sprayer, live.shop.boothId)).windows.filter(({ jobId }) => jobId === live.shop.jobId)
    const [window] = await mine()
    expect(window).toMatchObject({ state: 'too-early', pieces: ['Front 1', 'Front 2', 'Front 3'], opensAt: new Date(live.time.now + 60 * minuteMs).toISOString() })
    here.startTimers()
    const state = (wanted: string) => told<{ id: string; state: string } | null>('window', (one) => one?.id === window?.id && one?.state === wanted).length
    pass(60)
    await ear.until(() => state('open') === 1)
    live.time.now = Date.parse(window?.closingAt ?? '')
    await ear.until(() => state('closing') === 1)
    expect((await mine())[0]?.state).toBe('closing')
    const second = await pot()
    await spray(second, 'first-spray')
    await spray(second, 'last-spray')
    await ear.until(() => told('window', (one) => one === null).length === 1)
    const left = await mine()
    expect(left.map(({ id }) => id)).not.toContain(window?.id)
  })
})
