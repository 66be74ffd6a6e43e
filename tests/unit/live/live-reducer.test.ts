import { describe, expect, it } from 'vitest'
import type { LiveBooth, LiveEvent, LivePot, LiveSnapshot, LiveWindow } from '#shared/schemas/live'
import type { Timer } from '#shared/schemas/timers'
import { compareUrgency } from '#shared/utils/live-order'
import { alarmAt, applyEvent, catchUp, fromSnapshot, isAlarm, potAt, soundingSince, type LiveState } from '#shared/utils/live-reducer'

const at = '2026-11-17T07:00:00.000Z'

const pot = (id: string, more: Partial<LivePot> = {}): LivePot => ({
  id, code: `B-${id}`, stage: 'sealed', state: 'fresh', boothId: 'one', boothName: 'Booth 1', gunId: null, gunName: null, mixName: 'Sealer',
  mixCode: 'S', jobId: null, jobCode: null, jobTitle: null, stepTitle: null, purpose: 'Samples', potNumber: 1, potCount: 1, mixedByName: 'Ada', pouredG: '170',
  mixedAt: at, reactiveAt: at, lateAt: '2026-11-17T08:30:00.000Z', endsAt: '2026-11-17T09:00:00.000Z', standsUntil: null, firstSprayAt: null, lastSprayAt: null, guns: [],
  containsIsocyanates: true, chemistry: 'polyurethane', silencedUntil: null, silencedBy: null, alarm: 'none', alarmTimerId: null, leftoverG: null, ...more,
})

const timer = (id: string, more: Partial<Timer> = {}): Timer => ({
  id, kind: 'pot-up', subjectType: 'batch', subjectId: 'a', boothId: 'one', boothName: 'Booth 1', label: 'B-a Sealer', dueAt: at, state: 'fired',
  firedAt: at, announcedAt: at, silencedUntil: null, silencedBy: null, silencedReason: null, acknowledgedAt: null, acknowledgedBy: null, createdAt: at, version: 1, ...more,
})

const window = (id: string, more: Partial<LiveWindow> = {}): LiveWindow => ({
  id, jobId: 'j', jobCode: 'J-1', jobTitle: 'Fronts', jobStepId: 's', stepTitle: 'Sealer', pieces: ['1'], boothId: 'one', boothName: 'Booth 1',
  firstAt: at, lastAt: at, opensAt: '2026-11-17T09:00:00.000Z', closingAt: null, closesAt: '2026-11-17T19:00:00.000Z', state: 'too-early', assumed: false, unended: null, ...more,
})

const booth = (id: string): LiveBooth => ({ id, name: id, clearanceMin: '30', extraction: 'running', climate: null, clearance: null, guns: [] })

const snapshot = (more: Partial<LiveSnapshot> = {}): LiveSnapshot =>
  ({ serverNow: at, lastSeq: 10, boothId: 'one', pots: [pot('a')], windows: [window('w')], alarms: [], booths: [booth('one')], ...more })

const event = (seq: number, type: string, subject: string, payload: unknown): LiveEvent => ({ seq, type, at, serverNow: at, subject, payload })
const ids = (items: { id: string }[]) => items.map(({ id }) => id)
const after = (state: LiveState, ...events: LiveEvent[]) => events.reduce(applyEvent, state)

describe('events after a snapshot', () => {
  it('drops what is in the snapshot already', () => {
    const state = fromSnapshot(snapshot())
    expect(applyEvent(state, event(10, 'pot', 'batch:a', null))).toBe(state)
    expect(applyEvent(state, event(9, 'pot', 'batch:b', pot('b')))).toBe(state)
  })

  it('adds, changes and removes pots, the most urgent first', () => {
    const state = after(
      fromSnapshot(snapshot()),
      event(11, 'pot', 'batch:b', pot('b', { endsAt: '2026-11-17T08:00:00.000Z' })),
      event(12, 'pot', 'batch:c', pot('c', { state: 'life-up' })),
      event(13, 'pot', 'batch:a', pot('a', { state: 'closing' })),
    )
    expect(ids(state.pots)).toEqual(['c', 'a', 'b'])
    expect(state.lastSeq).toBe(13)
    expect(ids(after(state, event(14, 'pot', 'batch:c', pot('c', { state: 'emptied' }))).pots)).toEqual(['a', 'b'])
    expect(ids(after(state, event(14, 'pot', 'batch:a', null)).pots)).toEqual(['c', 'b'])
  })

  it('takes a pot off a booth when it was moved to another', () => {
    const moved = event(11, 'pot', 'batch:a', pot('a', { boothId: 'two' }))
    expect(applyEvent(fromSnapshot(snapshot()), moved).pots).toEqual([])
    expect(ids(applyEvent(fromSnapshot(snapshot({ boothId: null })), moved).pots)).toEqual(['a'])
  })

  it('keeps the alarm of another booth\'s pot but not its other timers', () => {
    const state = after(
      fromSnapshot(snapshot()),
      event(11, 'timer', 'timer:t', timer('t', { boothId: 'two' })),
      event(12, 'timer', 'timer:f', timer('f', { boothId: 'two', kind: 'free', subjectType: 'free' })),
      event(13, 'timer', 'timer:g', timer('g', { kind: 'free', subjectType: 'free' })),
    )
    expect(ids(state.alarms)).toEqual(['g', 't'])
    expect(ids(after(state, event(14, 'timer', 'timer:t', timer('t', { state: 'done' }))).alarms)).toEqual(['g'])
  })

  it('replaces and ends windows, the soonest to close first', () => {
    const state = after(
      fromSnapshot(snapshot()),
      event(11, 'window', 'application:v', window('v', { closesAt: '2026-11-17T12:00:00.000Z' })),
      event(12, 'window', 'application:u', window('u', { closesAt: null })),
    )
    expect(ids(state.windows)).toEqual(['v', 'w', 'u'])
    expect(ids(after(state, event(13, 'window', 'application:w', null)).windows)).toEqual(['v', 'u'])
  })

  it('shows a new reading in its booth only', () => {
    const reading = { id: 'r', boothId: 'one', airC: '21', rhPct: '50', surfaceC: null, dewPointC: '10.19', marginC: null, ok: null, source: 'typed', userId: null, at }
    const state = applyEvent(fromSnapshot(snapshot({ booths: [booth('one'), booth('two')] })), event(11, 'climate', 'booth:one', reading))
    expect(state.booths.map(({ climate }) => climate?.airC)).toEqual(['21', undefined])
  })

  it('moves the number on for kinds that it does not know', () => {
    expect(applyEvent(fromSnapshot(snapshot()), event(11, 'device', 'device:d', {})).lastSeq).toBe(11)
  })

  it('gives the same state whether events came before or after the snapshot was read', () => {
    const events = [event(11, 'pot', 'batch:b', pot('b')), event(12, 'pot', 'batch:a', null), event(13, 'pot', 'batch:d', pot('d'))]
    const late = snapshot({ lastSeq: 12, pots: [pot('b')] })
    expect(catchUp(late, events).pots).toEqual(after(fromSnapshot(snapshot()), ...events).pots)
  })
})

describe('alarms', () => {
  it('are pots whose life is up until they are emptied, and other timers until they are seen', () => {
    expect(isAlarm(timer('t', { state: 'acknowledged' }))).toBe(true)
    expect(isAlarm(timer('t', { state: 'done' }))).toBe(false)
    expect(isAlarm(timer('t', { kind: 'free', state: 'fired' }))).toBe(true)
    expect(isAlarm(timer('t', { kind: 'free', state: 'acknowledged' }))).toBe(false)
    expect(isAlarm(timer('t', { kind: 'pot-late', state: 'fired' }))).toBe(false)
  })

  it('sound again when the quiet is over, told or not', () => {
    const silenced = { alarm: 'silenced', silencedUntil: '2026-11-17T07:10:00.000Z' } as const
    expect(alarmAt(silenced, Date.parse('2026-11-17T07:09:59.999Z'))).toBe('silenced')
    expect(alarmAt(silenced, Date.parse('2026-11-17T07:10:00.000Z'))).toBe('sounding')
    expect(alarmAt({ alarm: 'none', silencedUntil: null }, 0)).toBe('none')
  })
})

it('orders pots by life up, closing, soonest end, and those without a life last', () => {
  const pots = [
    pot('n', { state: 'no-pot-life', endsAt: null }), pot('f2', { endsAt: '2026-11-17T10:00:00.000Z' }), pot('f1'),
    pot('c', { state: 'closing', endsAt: '2026-11-17T11:00:00.000Z' }), pot('u', { state: 'life-up' }),
  ]
  expect(ids(pots.sort(compareUrgency))).toEqual(['u', 'c', 'f1', 'f2', 'n'])
})

describe('a booth', () => {
  it('is told anew as a whole, and only its own to a wall', () => {
    const stopped: LiveBooth = { ...booth('one'), extraction: 'off' }
    const state = after(fromSnapshot(snapshot()), event(11, 'booth', 'booth:one', stopped), event(12, 'booth', 'booth:two', booth('two')))
    expect(state.booths).toEqual([stopped])
  })
})

describe('a pot whose life is up in another booth', () => {
  it('hangs on every wall until it is gone', () => {
    const up = pot('z', { boothId: 'two', state: 'life-up', alarm: 'sounding' })
    const state = after(fromSnapshot(snapshot()), event(11, 'pot', 'batch:z', up))
    expect(ids(state.pots)).toEqual(['z', 'a'])
    expect(ids(after(state, event(12, 'pot', 'batch:z', null)).pots)).toEqual(['a'])
  })
})

describe('a wall that has lost the server', () => {
  const ends = Date.parse('2026-11-17T09:00:00.000Z')

  it('goes on by the instants that it knows', () => {
    expect(potAt(pot('a'), Date.parse('2026-11-17T08:30:01.000Z')).state).toBe('fresh')
    expect(potAt(pot('a'), Date.parse('2026-11-17T08:30:02.000Z')).state).toBe('closing')
    expect(potAt(pot('a'), ends + 2_000)).toMatchObject({ state: 'life-up', alarm: 'sounding' })
    expect(potAt(pot('a', { state: 'emptied' }), ends + 2_000).state).toBe('emptied')
  })

  it('rings from the end of the pot that came last, and not for one that is silenced', () => {
    const up = (id: string, more: Partial<LivePot> = {}) => pot(id, { state: 'life-up', alarm: 'sounding', ...more })
    const later = '2026-11-17T09:05:00.000Z'
    expect(soundingSince([pot('a')], ends)).toBeNull()
    expect(soundingSince([up('a'), up('b', { endsAt: later })], ends + 600_000)).toBe(Date.parse(later))
    const silenced = up('a', { alarm: 'silenced', silencedUntil: later })
    expect(soundingSince([silenced], ends)).toBeNull()
    expect(soundingSince([silenced], Date.parse(later))).toBe(Date.parse(later))
  })
})
