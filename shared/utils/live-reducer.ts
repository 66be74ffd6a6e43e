import type { ClimateReading } from '../schemas/climate'
import type { LiveBooth, LiveEvent, LivePot, LiveSnapshot, LiveWindow } from '../schemas/live'
import type { Timer } from '../schemas/timers'
import { compareUrgency } from './live-order'

/** What a screen knows of the running shop: a snapshot and every event since. */
export interface LiveState {
  /** Number of the last event in it; older ones are dropped. */
  lastSeq: number
  /** The one booth that it is about, or null for the whole shop. */
  boothId: string | null
  /** The most urgent first. */
  pots: LivePot[]
  windows: LiveWindow[]
  alarms: Timer[]
  booths: LiveBooth[]
}

export const emptyLiveState: LiveState = { lastSeq: 0, boothId: null, pots: [], windows: [], alarms: [], booths: [] }

/** The state that a snapshot describes. */
export function fromSnapshot(snapshot: LiveSnapshot): LiveState {
  const { lastSeq, boothId, pots, windows, alarms, booths } = snapshot
  return { lastSeq, boothId, pots: [...pots].sort(compareUrgency), windows: [...windows].sort(byClose), alarms, booths }
}

/**
 * The state after an event. One that is already in it changes nothing, so that a repeat or a late snapshot does no
 * harm; a kind that is not known only moves the number on.
 */
export function applyEvent(state: LiveState, event: LiveEvent): LiveState {
  if (event.seq <= state.lastSeq) return state
  const moved = { ...state, lastSeq: event.seq }
  const id = event.subject.slice(event.subject.indexOf(':') + 1)
  switch (event.type) {
    case 'pot': return { ...moved, pots: placePot(state, id, event.payload as LivePot | null) }
    case 'window': return { ...moved, windows: placeWindow(state, id, event.payload as LiveWindow | null) }
    case 'timer': return { ...moved, alarms: placeAlarm(state, event.payload as Timer) }
    case 'booth': return { ...moved, booths: placeBooth(state, event.payload as LiveBooth) }
    case 'climate': return { ...moved, booths: placeClimate(state.booths, event.payload as ClimateReading) }
    default: return moved
  }
}

/** A snapshot with the events that came while it was being fetched. */
export function catchUp(snapshot: LiveSnapshot, since: readonly LiveEvent[]): LiveState {
  return since.reduce(applyEvent, fromSnapshot(snapshot))
}

const isHere = (state: LiveState, boothId: string | null) => state.boothId === null || boothId === null || boothId === state.boothId

function placePot(state: LiveState, id: string, pot: LivePot | null): LivePot[] {
  const others = state.pots.filter((known) => known.id !== id)
  if (pot === null || pot.state === 'emptied' || pot.state === 'stopped') return others
  // A pot whose life is up hangs on every wall of the shop.
  if (pot.state !== 'life-up' && !isHere(state, pot.boothId)) return others
  return [...others, pot].sort(compareUrgency)
}

function placeWindow(state: LiveState, id: string, window: LiveWindow | null): LiveWindow[] {
  const others = state.windows.filter((known) => known.id !== id)
  if (window === null || !isHere(state, window.boothId)) return others
  return [...others, window].sort(byClose)
}

function placeAlarm(state: LiveState, timer: Timer): Timer[] {
  const others = state.alarms.filter((known) => known.id !== timer.id)
  if (!isAlarm(timer) || (timer.kind !== 'pot-up' && !isHere(state, timer.boothId))) return others
  return [...others, timer].sort((a, b) => compare(a.dueAt, b.dueAt) || compare(a.id, b.id))
}

const quiet = new Set<Timer['kind']>(['pot-late', 'window-opens', 'window-closing', 'clearance'])

/** True for timers that call for a person: a pot whose life is up until it is emptied, others until they are seen. */
export function isAlarm({ kind, state }: Pick<Timer, 'kind' | 'state'>): boolean {
  if (kind === 'pot-up') return state === 'fired' || state === 'acknowledged'
  return state === 'fired' && !quiet.has(kind)
}

function placeClimate(booths: LiveBooth[], reading: ClimateReading): LiveBooth[] {
  return booths.map((booth) => (booth.id === reading.boothId ? { ...booth, climate: reading } : booth))
}

function placeBooth(state: LiveState, booth: LiveBooth): LiveBooth[] {
  if (!isHere(state, booth.id)) return state.booths
  const known = state.booths.some(({ id }) => id === booth.id)
  return known ? state.booths.map((one) => (one.id === booth.id ? booth : one)) : [...state.booths, booth]
}

/** What an alarm does at `now`, epoch milliseconds: a quiet that is over counts as over, told or not. */
export function alarmAt(pot: Pick<LivePot, 'alarm' | 'silencedUntil'>, now: number): LivePot['alarm'] {
  if (pot.alarm !== 'silenced' || pot.silencedUntil === null) return pot.alarm
  return Date.parse(pot.silencedUntil) <= now ? 'sounding' : 'silenced'
}

/** The server says when a pot is closing or up; only what it has not said after so long is taken from the instants. */
const serverSaysMs = 2_000

/**
 * The pot at `now`, epoch milliseconds. A screen that has lost the server goes on by the instants that it knows: the
 * timers run on, and ring.
 */
export function potAt(pot: LivePot, now: number): LivePot {
  if (pot.state !== 'fresh' && pot.state !== 'closing') return pot
  const past = (instant: string | null) => instant !== null && Date.parse(instant) + serverSaysMs <= now
  if (past(pot.endsAt)) return { ...pot, state: 'life-up', alarm: 'sounding' }
  return past(pot.lateAt) ? { ...pot, state: 'closing' } : pot
}

/**
 * Since when the bell of a booth rings at `now`, epoch milliseconds: the latest of its pots that are up and not silenced,
 * so that another pot is heard as such. Null: it is quiet.
 */
export function soundingSince(pots: readonly Pick<LivePot, 'state' | 'alarm' | 'silencedUntil' | 'endsAt'>[], now: number): number | null {
  const since = pots.filter((pot) => pot.state === 'life-up' && alarmAt(pot, now) === 'sounding')
    .flatMap(({ endsAt, silencedUntil }) => silencedUntil ?? endsAt ?? []).map((at) => Date.parse(at))
  return since.length > 0 ? Math.max(...since) : null
}

function byClose(a: LiveWindow, b: LiveWindow): number {
  return compare(a.closesAt ?? '9', b.closesAt ?? '9') || compare(a.opensAt, b.opensAt) || compare(a.id, b.id)
}

const compare = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0)
