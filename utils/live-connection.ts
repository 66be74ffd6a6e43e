import { backoffMs } from '#shared/utils/backoff'

/** A beat comes every fifteen seconds; after so long without a word the connection counts as lost. */
export const silenceMs = 20_000

/** A connection that has not said a word after so long is tried anew. */
const openingMs = 8_000

/** The part of EventSource that is used, so that a test can stand in for the network. */
export interface Source {
  addEventListener(type: string, listener: (event: { data?: string }) => void): void
  close(): void
}

interface Options {
  /** Fetches everything anew; what is heard after it continues it. */
  load: () => Promise<void>
  /** Opens the stream from where the load ended. */
  open: () => Source
  /** Text of an event's data. */
  onEvent: (data: string) => void
  onBeat: (data: string) => void
  /** Called when what is shown may not be what is any more. */
  onStale: () => void
  /** Called with every failure to load; the connection goes on trying whatever it was. */
  onFailure: (error: unknown) => void
  random?: () => number
}

/**
 * Keeps one stream open for as long as the page lives. A browser gives up on a refused or broken stream; this does not:
 * it loads and opens again with growing pauses, for weeks if need be.
 */
export class LiveConnection {
  readonly #options: Options
  #source: Source | null = null
  #timer: ReturnType<typeof setTimeout> | undefined
  #attempt = 0
  #failures = 0
  #heardAt = 0
  #waiting = false
  #closed = false

  constructor(options: Options) {
    this.#options = options
  }

  /** Loads and opens at once, dropping what was open. */
  connect(): void {
    if (this.#closed) return
    const attempt = this.#drop()
    this.#heardAt = Date.now()
    this.#watch(attempt, openingMs)
    this.#load(attempt, () => this.#open(attempt))
  }

  /** The page is seen again or the network is back: what was lost meanwhile is noticed now. */
  nudge(): void {
    if (this.#waiting || Date.now() - this.#heardAt > silenceMs) this.connect()
  }

  close(): void {
    this.#closed = true
    this.#drop()
  }

  #load(attempt: number, then: () => void): void {
    this.#options.load().then(
      () => { if (attempt === this.#attempt) then() },
      (error: unknown) => {
        if (attempt !== this.#attempt) return
        this.#options.onFailure(error)
        this.#fail(attempt)
      },
    )
  }

  #open(attempt: number): void {
    const source = this.#options.open()
    this.#source = source
    const on = (type: string, act: (data: string) => void) => source.addEventListener(type, ({ data }) => {
      if (attempt !== this.#attempt) return
      this.#heard(attempt)
      act(data ?? '')
    })
    on('message', this.#options.onEvent)
    on('beat', this.#options.onBeat)
    on('resync', (data) => {
      this.#options.onBeat(data)
      this.#load(attempt, () => {})
    })
    source.addEventListener('error', () => this.#fail(attempt))
  }

  #heard(attempt: number): void {
    this.#failures = 0
    this.#heardAt = Date.now()
    this.#watch(attempt, silenceMs)
  }

  #watch(attempt: number, ms: number): void {
    clearTimeout(this.#timer)
    this.#timer = setTimeout(() => this.#fail(attempt), ms)
  }

  /** One failure may be a blink; the second in a row, or silence, makes what is shown stale. */
  #fail(attempt: number): void {
    if (attempt !== this.#attempt || this.#closed) return
    this.#failures++
    if (this.#failures > 1 || Date.now() - this.#heardAt >= openingMs) this.#options.onStale()
    this.#drop()
    this.#waiting = true
    const random = this.#options.random ?? Math.random
    this.#timer = setTimeout(() => this.connect(), backoffMs(this.#failures, random()))
  }

  #drop(): number {
    clearTimeout(this.#timer)
    this.#waiting = false
    this.#source?.close()
    this.#source = null
    return ++this.#attempt
  }
}
