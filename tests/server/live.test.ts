import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import type { LiveSnapshot } from '#shared/schemas/live'
import { catchUp, fromSnapshot } from '#shared/utils/live-reducer'
import { longestGap } from '../../server/live/stream'
import { RedisWake } from '../../server/live/redis'
import { readHead } from '../../server/repositories/events'
import { readConsistent } from '../../server/repositories/snapshot'
import { getTimer } from '../../server/repositories/timers'
import { saveDraft } from '../../server/services/drafts'
import { readLive } from '../../server/services/live'
import { createTimer, finishTimer } from '../../server/services/timers'
import { mutate } from '../../server/utils/transactions'
import { draftBody } from '../factories/drafts'
import { openLiveShop, Station, type Ear, type LiveShop } from './support/live'

let live: LiveShop
let stations: Station[] = []

beforeAll(async () => { live = await openLiveShop('live') })
afterEach(async () => {
  await Promise.all(stations.map((station) => station.stop()))
  stations = []
})
afterAll(() => live.drop())

function station(options: ConstructorParameters<typeof Station>[1] = {}): Station {
  const made = new Station(live, options)
  stations.push(made)
  return made
}

const timer = (name: string, boothId: string | null = null) => ({ name, minutes: 60, boothId })
const seqs = (ear: Ear) => ear.events.map(({ seq }) => seq)
const head = () => readHead(live.db)

async function seqsAfter(from: number): Promise<number[]> {
  const rows = await live.admin('events').where('seq', '>', from).orderBy('seq').select<{ seq: string }[]>('seq')
  return rows.map(({ seq }) => Number(seq))
}

describe('the event stream', () => {
  it('brings every event of eight writers once and in order, also to those that are cut off again and again', async () => {
    const here = station()
    const from = await head()
    const steady = await here.listen()
    const writers = Array.from({ length: 8 }, async (_, writer) => {
      for (let turn = 0; turn < 15; turn++) await createTimer(live.as('sprayer', here.hub.wake), timer(`writer ${writer} turn ${turn}`))
    })
    const cut: number[] = []
    let last = from
    const cutting = (async () => {
      while (cut.length < 120) {
        const ear = await here.listen({ lastEventId: last })
        const enough = Math.min(cut.length + 1 + Math.floor(Math.random() * 9), 120)
        await ear.until(() => cut.length + ear.events.length >= enough, `event ${enough} of 120`)
        ear.stream.destroy()
        cut.push(...seqs(ear))
        last = cut.at(-1) ?? last
      }
    })()
    await Promise.all([...writers, cutting])
    await steady.until(() => steady.events.length >= 120, 'all 120 events')
    const stored = await seqsAfter(from)
    expect(stored).toHaveLength(120)
    expect(seqs(steady)).toEqual(stored)
    expect(cut).toEqual(stored)
  })

  it('holds back what happens while missed events are still being read', async () => {
    const from = await head()
    for (const name of ['one', 'two', 'three']) await createTimer(live.as('sprayer'), timer(name))
    const last = await head()
    const here = station()
    await here.listen()
    const opening = here.listen({ lastEventId: from })
    while (here.hub.size < 2) await Promise.resolve()
    const serverNow = new Date(live.time.now).toISOString()
    here.hub.dispatch({ seq: last + 1, type: 'timer', at: serverNow, serverNow, subject: 'timer:x', boothId: null, payloadJson: '{}' })
    const ear = await opening
    await ear.until(() => ear.events.length === 4)
    expect(seqs(ear)).toEqual([...(await seqsAfter(from)), last + 1])
  })

  it('carries number, kind, instants, subject and payload', async () => {
    const here = station()
    const ear = await here.listen()
    const made = await createTimer(live.as('sprayer', here.hub.wake), timer('Facts'))
    await ear.until(() => ear.events.length === 1)
    const [heard] = ear.heard.filter(({ name }) => name === 'message')
    expect(heard?.id).toBe(await head())
    expect(heard?.data).toEqual({
      seq: heard?.id, type: 'timer', at: made.createdAt, serverNow: new Date(live.time.now).toISOString(), subject: `timer:${made.id}`, payload: made,
    })
  })

  it('tells a browser to come back after one to three seconds and where it stands', async () => {
    const ear = await station().listen()
    const retry = Number(/^retry: (\d+)$/m.exec(ear.raw.join(''))?.[1])
    expect(retry).toBeGreaterThanOrEqual(1_000)
    expect(retry).toBeLessThan(3_000)
    expect(ear.heard).toEqual([{ name: 'beat', id: await head(), data: { serverNow: new Date(live.time.now).toISOString(), lastSeq: await head() } }])
  })

  it('beats with the server\'s clock while nothing happens', async () => {
    const deviceId = live.shop.screenId
    const ear = await station({ beatMs: 20 }).listen({ listener: { sessionId: null, deviceId } })
    live.time.now += 90_000
    const expected = new Date(live.time.now).toISOString()
    await ear.until(() => ear.named('beat').at(-1)?.serverNow === expected)
    expect(ear.heard.at(-1)?.id).toBe(await head())
  })

  it('hears commits of another process by its poll', async () => {
    const other = station({ pollMs: 20 })
    const ear = await other.listen()
    await createTimer(live.as('sprayer'), timer('Elsewhere'))
    await ear.until(() => ear.events.length === 1)
  })

  it('goes on by polling when Redis is lost, and says so once', async () => {
    const here = station({ pollMs: 20 })
    const ear = await here.listen()
    const before = live.lines.length
    const told = () => live.lines.slice(before).filter(({ message }) => message.startsWith('Redis is lost')).length
    // Nothing listens on the discard port: every connection is refused.
    const redis = new RedisWake('redis://127.0.0.1:9', here.hub, () => here.pump.wake(), live.log)
    let written = 0
    while (told() === 0 || written < 5) await createTimer(live.as('sprayer', here.hub.wake), timer(`Lost ${++written}`))
    await ear.until(() => ear.events.length === written)
    redis.close()
    expect(told()).toBe(1)
  })
})

describe('a client that comes back', () => {
  const resyncs = (ear: Ear) => ear.named('resync').map(({ lastSeq }) => lastSeq)

  it('gets one resync when it is too far behind', async () => {
    const from = await head()
    await live.admin('ledger_head').update({ seq: from + longestGap + 1 })
    const ear = await station().listen({ lastEventId: from })
    expect(resyncs(ear)).toEqual([from + longestGap + 1])
    expect(ear.events).toEqual([])
  })

  it('gets one resync when events that it misses were removed, and none when all are there', async () => {
    const from = await head()
    for (const name of ['one', 'two', 'three']) await createTimer(live.as('sprayer'), timer(name))
    const here = station()
    const whole = await here.listen({ lastEventId: from })
    expect([whole.events.length, resyncs(whole).length]).toEqual([3, 0])
    const [first] = await seqsAfter(from)
    await live.admin('events').where('seq', first).delete()
    const broken = await here.listen({ lastEventId: from })
    expect([broken.events.length, resyncs(broken)]).toEqual([0, [await head()]])
  })

  it('gets one resync when its number is ahead of the ledger, and goes on from there', async () => {
    const here = station()
    const ear = await here.listen({ lastEventId: (await head()) + 1_000 })
    expect(resyncs(ear)).toEqual([await head()])
    await createTimer(live.as('sprayer', here.hub.wake), timer('After'))
    await ear.until(() => ear.events.length === 1)
  })

  it('is told to start over when the database was set back under the server', async () => {
    const here = station({ pollMs: 20 })
    const ear = await here.listen()
    await createTimer(live.as('sprayer', here.hub.wake), timer('Gone'))
    await ear.until(() => ear.events.length === 1)
    const back = (await head()) - 2
    await live.admin('events').where('seq', '>', back).delete()
    await live.admin('audit_entries').where('seq', '>', back).delete()
    const { hash } = await live.admin('audit_entries').orderBy('seq', 'desc').first<{ hash: string }>('hash')
    await live.admin('ledger_head').update({ seq: back, hash })
    await ear.until(() => resyncs(ear).length === 1)
    expect(resyncs(ear)).toEqual([back])
    await createTimer(live.as('sprayer', here.hub.wake), timer('Again'))
    await ear.until(() => ear.events.length === 2)
  })
})

describe('who hears what', () => {
  it('a booth hears its own pots and timers, and of others only that their pots are up', async () => {
    const { boothId, otherBoothId } = live.shop
    const here = station()
    const ear = await here.listen({ audience: { boothId } })
    const all = await here.listen()
    await createTimer(live.as('sprayer', here.hub.wake), timer('Mine', boothId))
    await createTimer(live.as('sprayer', here.hub.wake), timer('Theirs', otherBoothId))
    await saveDraft(live.as('sprayer', here.hub.wake), randomUUID(), draftBody(live.shop, { boothId: otherBoothId }))
    await createTimer(live.as('sprayer', here.hub.wake), timer('Everybody\'s'))
    await all.until(() => all.events.length >= 4)
    await ear.until(() => ear.events.length >= 3)
    expect(ear.events.map(({ type, payload }) => [type, payload === null ? null : (payload as { label?: string }).label]))
      .toEqual([['timer', 'Mine'], ['pot', null], ['timer', 'Everybody\'s']])
  })

  it('a stream ends with its session, with its device, and with the server', async () => {
    const here = station()
    const sessionId = 'a'.repeat(64)
    const signedIn = await here.listen({ listener: { sessionId, deviceId: null } })
    const other = await here.listen({ listener: { sessionId: 'b'.repeat(64), deviceId: null } })
    const screen = await here.listen({ listener: { sessionId: null, deviceId: live.shop.screenId } })
    await mutate(live.as('sprayer', here.hub.wake), async (m) => {
      m.audit({ action: 'session.ended', subject: `user:${live.shop.users.sprayer}`, facts: {} })
      m.publish({ type: 'session-ended', subject: `session:${sessionId}`, boothId: null, payload: {} })
      return null
    })
    await signedIn.until(() => signedIn.ended)
    expect([other.ended, screen.ended]).toEqual([false, false])
    here.hub.endDevice(live.shop.screenId)
    await screen.until(() => screen.ended)
    here.hub.close()
    await other.until(() => other.ended)
    expect(other.events).toEqual([])
    const late = await here.listen()
    await late.until(() => late.ended)
  })

  it('a stream whose session is no more is closed at the next beat, whoever ended it', async () => {
    const ear = await station({ beatMs: 20 }).listen({ listener: { sessionId: 'c'.repeat(64), deviceId: null } })
    await ear.until(() => ear.ended)
  })
})

describe('the snapshot', () => {
  it('and the events after its number make what a later snapshot says, also while others write', async () => {
    const here = station()
    const from = await head()
    const ear = await here.listen()
    const ctx = live.as('sprayer', here.hub.wake)
    const snapshots: LiveSnapshot[] = []
    const writing = Promise.all([1, 2, 3].map(async (writer) => {
      for (let turn = 0; turn < 6; turn++) {
        const made = await createTimer(ctx, timer(`s${writer}-${turn}`, live.shop.boothId))
        await live.admin('timers').where({ id: made.id }).update({ state: 'fired' })
        await saveDraft(ctx, randomUUID(), draftBody(live.shop, { purpose: `Pot ${writer}-${turn}`, jobStepId: null, pieceIds: [] }))
        if (turn % 2 === 0) await finishTimer(ctx, made.id)
      }
    }))
    for (let turn = 0; turn < 8; turn++) snapshots.push(await readLive(ctx, undefined))
    await writing
    const final = fromSnapshot(await readLive(ctx, undefined))
    await ear.until(() => ear.events.length === 3 * (6 * 2 + 3))
    for (const snapshot of snapshots) expect(catchUp(snapshot, ear.events).pots).toEqual(final.pots)
    expect(snapshots.every(({ lastSeq }) => lastSeq >= from)).toBe(true)
    expect(new Set(snapshots.map(({ pots }) => pots.length)).size).toBeGreaterThan(1)
  })

  it('does not see what is committed after its number was read', async () => {
    const ctx = live.as('sprayer')
    await readConsistent(live.db, async (trx) => {
      const seq = await readHead(trx)
      const made = await createTimer(ctx, timer('Too late for this view'))
      expect(await getTimer(made.id, live.db)).not.toBeNull()
      expect([await getTimer(made.id, trx), await readHead(trx)]).toEqual([null, seq])
    })
  })

  it('of a booth holds its pots and those of no booth, and refuses a screen that asks for another', async () => {
    const { boothId, otherBoothId } = live.shop
    const ctx = live.as('sprayer')
    const [mine, theirs] = [randomUUID(), randomUUID()]
    await saveDraft(ctx, mine, draftBody(live.shop))
    await saveDraft(ctx, theirs, draftBody(live.shop, { boothId: otherBoothId }))
    const here = await readLive(live.asScreen(boothId), undefined)
    expect(here.boothId).toBe(boothId)
    expect(here.booths.map(({ id }) => id)).toEqual([boothId])
    const ids = here.pots.map(({ id }) => id)
    expect([ids.includes(mine), ids.includes(theirs)]).toEqual([true, false])
    expect(() => readLive(live.asScreen(boothId), otherBoothId)).toThrow('This screen belongs to another booth.')
  })
})
