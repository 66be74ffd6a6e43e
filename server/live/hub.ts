/** An event on its way to the screens. Its payload stays the JSON text of the row: nothing is parsed to be printed again. */
export interface HubEvent {
  seq: number
  type: string
  /** ISO 8601 UTC, when it was committed. */
  at: string
  /** ISO 8601 UTC, the server's present when it was handed on. */
  serverNow: string
  subject: string
  boothId: string | null
  payloadJson: string
}

/** A moment of the server's clock and the last number that was handed on. */
export interface Beat {
  serverNow: string
  lastSeq: number
}

/** One open stream. Its methods must return at once and must not throw. */
export interface Subscriber {
  sessionId: string | null
  deviceId: string | null
  event(event: HubEvent): void
  beat(beat: Beat): void
  /** What was missed cannot be told any more: fetch everything anew. */
  resync(beat: Beat): void
  /** The stream is over; the subscription is ended already. */
  end(): void
}

/** True for events between the parts of the server, which never leave it. */
export const isInternalEvent = (type: string): boolean => type === 'session-ended' || type === 'device-ended'

/**
 * Where committed events reach the open streams of this process, each once and in the order of their numbers.
 * The pump feeds it; services only wake it.
 */
export class EventHub {
  readonly #subscribers = new Set<Subscriber>()
  readonly #wakers = new Set<(seq: number) => void>()
  readonly #waiting = new Set<() => void>()
  #position: number | null = null
  #closed = false

  /** Tells the pump that something up to this number was committed here. */
  readonly wake = (seq: number): void => {
    for (const waker of this.#wakers) waker(seq)
  }

  /** Calls `waker` after every commit of this process until the returned function is called. */
  onWake(waker: (seq: number) => void): () => void {
    this.#wakers.add(waker)
    return () => void this.#wakers.delete(waker)
  }

  get closed(): boolean {
    return this.#closed
  }

  /** How many streams are open. */
  get size(): number {
    return this.#subscribers.size
  }

  /**
   * Subscribes at the present position: every later event is handed over, none before it.
   *
   * @returns the position, and how to unsubscribe
   */
  async subscribe(subscriber: Subscriber): Promise<{ position: number; unsubscribe: () => void }> {
    while (this.#position === null && !this.#closed) await new Promise<void>((resolve) => this.#waiting.add(resolve))
    const unsubscribe = () => void this.#subscribers.delete(subscriber)
    if (this.#closed) subscriber.end()
    else this.#subscribers.add(subscriber)
    return { position: this.#position ?? 0, unsubscribe }
  }

  /** Moves the position without an event, where numbers were given to audit entries alone. */
  advance(seq: number): void {
    this.#position = seq
    for (const resolve of this.#waiting) resolve()
    this.#waiting.clear()
  }

  /** Hands an event to every stream, or ends the streams that it is about. */
  dispatch(event: HubEvent): void {
    this.advance(event.seq)
    const id = event.subject.slice(event.subject.indexOf(':') + 1)
    if (event.type === 'session-ended') this.endSession(id)
    if (event.type === 'device-ended') this.endDevice(id)
    if (isInternalEvent(event.type)) return
    for (const subscriber of this.#subscribers) subscriber.event(event)
  }

  beat(beat: Beat): void {
    for (const subscriber of this.#subscribers) subscriber.beat(beat)
  }

  resync(beat: Beat): void {
    this.advance(beat.lastSeq)
    for (const subscriber of this.#subscribers) subscriber.resync(beat)
  }

  endSession(sessionId: string): void {
    this.#end((subscriber) => subscriber.sessionId === sessionId)
  }

  endDevice(deviceId: string): void {
    this.#end((subscriber) => subscriber.deviceId === deviceId)
  }

  /** Ends every stream; later subscribers are ended at once. */
  close(): void {
    this.#closed = true
    this.#end(() => true)
    for (const resolve of this.#waiting) resolve()
    this.#waiting.clear()
  }

  #end(concerned: (subscriber: Subscriber) => boolean): void {
    for (const subscriber of this.#subscribers) {
      if (!concerned(subscriber)) continue
      this.#subscribers.delete(subscriber)
      subscriber.end()
    }
  }
}
