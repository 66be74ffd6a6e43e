/** Where weights come from. A scale on a cable, a simulated one and the keypad all look the same to the pour. */
export type ScaleSourceKind = 'typed' | 'scale' | 'simulated' | 'bridge'

/** `lost`: it answered and no longer does; its last reading is old. */
export type ScaleSourceState = 'not-connected' | 'connecting' | 'ready' | 'lost'

/** One reading since the last tare. `grams` is a plain decimal, '' where nothing was read yet; `at` epoch milliseconds. */
export interface ScaleReading {
  grams: string
  /** Unchanged long enough to be a weight. */
  steady: boolean
  at: number
}

export interface ScaleSource {
  readonly kind: ScaleSourceKind
  state: () => ScaleSourceState
  connect: () => Promise<void>
  disconnect: () => void
  /** Counts from zero again. */
  tare: () => Promise<void>
  /** Calls back at each reading and each change from moving to steady. Answers the function that stops it. */
  readings: (listener: (reading: ScaleReading) => void) => () => void
  /** Calls back when the state changes. Answers the function that stops it. */
  states: (listener: (state: ScaleSourceState) => void) => () => void
}

/** The keypad as a scale: what is typed is what it reads. */
export interface KeypadSource extends ScaleSource {
  readonly kind: 'typed'
  /** A plain decimal, or '' when the figure was wiped. `settled`: the person said that it is done. */
  type: (grams: string, settled?: boolean) => void
  /** Forgets what was typed and tells nobody: the next component begins. */
  reset: () => void
}

/** A weight counts after it stood still so long. */
export const STEADY_MS = 1000

/** The clock and the timer that a source runs on, handed in so that a test can hold them. */
export interface SourceClock {
  now: () => number
  /** Calls back once after so many milliseconds; answers the function that calls it off. */
  after: (ms: number, call: () => void) => () => void
}

/** A figure on the keypad is in motion while it is typed and steady a second after the last key. */
export function keypadSource(clock: SourceClock): KeypadSource {
  const listeners = new Set<(reading: ScaleReading) => void>()
  const watchers = new Set<(state: ScaleSourceState) => void>()
  let callOff = (): void => undefined
  let connected = false

  function tell(grams: string, steady: boolean): void {
    for (const listener of listeners) listener({ grams, steady, at: clock.now() })
  }

  function type(grams: string, settled = false): void {
    callOff()
    callOff = () => undefined
    if (grams === '' || settled) return tell(grams, grams !== '')
    tell(grams, false)
    callOff = clock.after(STEADY_MS, () => tell(grams, true))
  }

  return {
    kind: 'typed',
    state: () => (connected ? 'ready' : 'not-connected'),
    connect: () => {
      connected = true
      for (const watcher of watchers) watcher('ready')
      return Promise.resolve()
    },
    disconnect: () => {
      connected = false
      callOff()
      listeners.clear()
      watchers.clear()
    },
    tare: () => {
      type('')
      return Promise.resolve()
    },
    readings: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    states: (watcher) => {
      watchers.add(watcher)
      return () => watchers.delete(watcher)
    },
    type,
    reset: () => {
      callOff()
      callOff = () => undefined
    },
  }
}
