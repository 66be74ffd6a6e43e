import { D, print, roundTo } from '../engine/decimal'
import type { Dec } from '../engine/decimal'
import { STEADY_MS } from './bench-scale'
import type { ScaleReading, ScaleSource, ScaleSourceState, SourceClock } from './bench-scale'

/** How material runs into the cup of the simulated scale. */
export type SimulatedFlow = 'pour' | 'thin' | 'drops'

/** Between two readings. */
const TICK_MS = 100
/** Grams that run in between two readings. */
const FLOW_G: Record<SimulatedFlow, string> = { pour: '12', thin: '1.2', drops: '0.1' }
/** The empty cup. */
const CUP_G = '48'
/** What `spill` takes out of the cup. */
export const SPILL_G = '5'
/** A stream presses on the cup, in divisions of the scale; after it the reading swings. */
const JET_DIVISIONS = 2
const SWING_DIVISIONS = [1, -1, 0] as const
/** Shares of the cup on the scale while it is lifted and put back, then the swing. */
const LIFTING = ['0.6', '0.2', '0'] as const
const LANDING = ['0.5', '0.9'] as const

export interface SimulatedStart {
  divisionG: string
  capacityG: string
  /** What is in the cup, and what the scale reads of it since its last tare. */
  inCupG: string
  readingG: string
  /** The cup is off the scale. */
  lifted: boolean
}

/** What somebody could see: whether material runs and whether the cup stands on the scale. */
export interface SimulatedSight {
  flow: SimulatedFlow | null
  onPan: boolean
  connected: boolean
}

/**
 * A scale for practice and for showing the product, with a cup and a tin that run into it. Always the same: each act
 * gives the same readings, on the clock that is handed in. It never stops a pour by itself, short of its own capacity.
 */
export class SimulatedScale implements ScaleSource {
  readonly kind = 'simulated'
  readonly #clock: SourceClock
  readonly #division: Dec
  readonly #capacity: Dec
  readonly #listeners = new Set<(reading: ScaleReading) => void>()
  readonly #watchers = new Set<(state: ScaleSourceState) => void>()
  #state: ScaleSourceState = 'not-connected'
  #material: Dec
  #tare: Dec
  #onPan: boolean
  #flow: SimulatedFlow | null = null
  /** Gross weights still to be shown, one a tick. */
  #frames: Dec[] = []
  #shown: Dec
  #steady = false
  #callOff: () => void = () => undefined

  constructor(clock: SourceClock, start: SimulatedStart) {
    this.#clock = clock
    this.#division = new D(start.divisionG)
    this.#capacity = new D(start.capacityG)
    this.#material = new D(start.inCupG)
    this.#onPan = !start.lifted
    this.#tare = this.#material.plus(CUP_G).minus(start.readingG === '' ? '0' : start.readingG)
    this.#shown = this.#gross()
  }

  state(): ScaleSourceState {
    return this.#state
  }

  sight(): SimulatedSight {
    return { flow: this.#flow, onPan: this.#onPan, connected: this.#state === 'ready' }
  }

  connect(): Promise<void> {
    this.#change('ready')
    this.#moved()
    return Promise.resolve()
  }

  disconnect(): void {
    this.#callOff()
    this.#flow = null
    this.#listeners.clear()
    this.#watchers.clear()
    this.#state = 'not-connected'
  }

  tare(): Promise<void> {
    this.#tare = this.#gross()
    this.#frames = []
    this.#moved()
    return Promise.resolve()
  }

  readings(listener: (reading: ScaleReading) => void): () => void {
    this.#listeners.add(listener)
    return () => this.#listeners.delete(listener)
  }

  states(watcher: (state: ScaleSourceState) => void): () => void {
    this.#watchers.add(watcher)
    return () => this.#watchers.delete(watcher)
  }

  /** Material runs into the cup until it is closed. Into a cup that is not there nothing is poured. */
  open(flow: SimulatedFlow): void {
    if (!this.#onPan) return
    this.#flow = flow
    this.#next()
  }

  close(): void {
    if (this.#flow === null) return
    this.#flow = null
    this.#frames = this.#swing()
    this.#next()
  }

  lift(): void {
    if (!this.#onPan) return
    const full = this.#gross()
    this.#flow = null
    this.#onPan = false
    this.#frames = LIFTING.map(share => full.times(share))
    this.#next()
  }

  putBack(): void {
    if (this.#onPan) return
    this.#onPan = true
    this.#frames = [...LANDING.map(share => this.#gross().times(share)), ...this.#swing()]
    this.#next()
  }

  /** Takes a little out of the cup while it is off the scale. */
  spill(): void {
    if (!this.#onPan) this.#material = D.max(0, this.#material.minus(SPILL_G))
  }

  /** The cable is out: nothing is told any more. What runs, runs on into the cup. */
  unplug(): void {
    if (this.#state !== 'ready') return
    this.#change('lost')
  }

  plugIn(): void {
    if (this.#state !== 'lost') return
    this.#change('ready')
    this.#moved()
  }

  #gross(): Dec {
    return this.#onPan ? this.#material.plus(CUP_G) : new D(0)
  }

  #swing(): Dec[] {
    return SWING_DIVISIONS.map(divisions => this.#gross().plus(this.#division.times(divisions)))
  }

  #next(): void {
    this.#callOff()
    this.#callOff = this.#clock.after(TICK_MS, () => this.#tick())
  }

  #tick(): void {
    if (this.#flow !== null) this.#run(this.#flow)
    const frame = this.#flow === null ? this.#frames.shift() : this.#gross().plus(this.#division.times(JET_DIVISIONS))
    this.#shown = frame ?? this.#gross()
    this.#steady = false
    this.#tell()
    if (this.#flow !== null || this.#frames.length > 0) this.#next()
    else this.#settle()
  }

  /** A tin does not give more than the scale can carry. */
  #run(flow: SimulatedFlow): void {
    const room = this.#capacity.minus(this.#gross()).minus(this.#division.times(JET_DIVISIONS))
    this.#material = this.#material.plus(D.max(0, D.min(FLOW_G[flow], room)))
  }

  /** Something changed without moving the cup: the reading stands at once and becomes steady in its time. */
  #moved(): void {
    if (this.#flow !== null || this.#frames.length > 0) return this.#next()
    this.#shown = this.#gross()
    this.#steady = false
    this.#tell()
    this.#settle()
  }

  #settle(): void {
    this.#callOff()
    this.#callOff = this.#clock.after(STEADY_MS, () => {
      this.#steady = true
      this.#tell()
    })
  }

  #tell(): void {
    if (this.#state !== 'ready') return
    const net = roundTo(this.#shown.minus(this.#tare), this.#division)
    for (const listener of this.#listeners) listener({ grams: print(net), steady: this.#steady, at: this.#clock.now() })
  }

  #change(state: ScaleSourceState): void {
    this.#state = state
    for (const watcher of this.#watchers) watcher(state)
  }
}
