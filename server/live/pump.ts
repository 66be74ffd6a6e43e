import type { Knex } from 'knex'
import { eventsAfter, readHead } from '../repositories/events'
import type { Clock } from '../utils/clock'
import { isoOf, toInstant } from '../utils/rows'
import type { EventHub } from './hub'
import { Loop, type LiveLog } from './loop'

/** What the pump works with. The two intervals are in milliseconds. */
export interface PumpOptions {
  db: Knex
  clock: Clock
  hub: EventHub
  log: LiveLog
  /** How often it looks without having been woken. */
  pollMs?: number
  /** How often open streams hear from it when nothing happens. */
  beatMs?: number
}

const page = 500

/**
 * Carries committed events from the database to the hub: in the order of their numbers, which is the order of
 * commits, each once. It starts where the ledger stands.
 */
export class EventPump {
  readonly #options: Required<PumpOptions>
  readonly #loop: Loop
  readonly #forget: () => void
  #position: number | null = null
  #nextBeat = performance.now()

  constructor(options: PumpOptions) {
    this.#options = { pollMs: 2_000, beatMs: 15_000, ...options }
    this.#loop = new Loop('event pump', () => this.#turn(), options.log)
    this.#forget = options.hub.onWake(() => this.wake())
  }

  start(): void {
    this.#nextBeat = performance.now() + this.#options.beatMs
    this.#loop.start()
  }

  /** Looks now, because something was committed here or elsewhere. */
  wake(): void {
    this.#loop.wake()
  }

  async stop(): Promise<void> {
    this.#forget()
    await this.#loop.stop()
  }

  async #turn(): Promise<number> {
    const { db, hub, pollMs, beatMs } = this.#options
    const head = await readHead(db)
    if (this.#position === null) this.#moveTo(head)
    else if (head < this.#position) await this.#startOver(head)
    else if (head > this.#position) await this.#carry(this.#position, head)
    if (performance.now() >= this.#nextBeat) {
      this.#nextBeat = performance.now() + beatMs
      if (hub.size > 0) hub.beat({ serverNow: await this.#now(), lastSeq: this.#position ?? head })
    }
    return Math.max(0, Math.min(pollMs, this.#nextBeat - performance.now()))
  }

  async #carry(from: number, head: number): Promise<void> {
    const { db, hub } = this.#options
    let last = from
    for (;;) {
      const events = await eventsAfter(last, page, db, head)
      const serverNow = events.length > 0 ? await this.#now() : ''
      for (const event of events) {
        last = event.seq
        this.#position = last
        hub.dispatch({ ...event, serverNow })
      }
      if (events.length < page || this.#loop.stopped) break
    }
    if (!this.#loop.stopped) this.#moveTo(head)
  }

  /** The database was set back, for example from a backup: what streams know is of another past. */
  async #startOver(head: number): Promise<void> {
    this.#options.log.warn({ head, position: this.#position }, 'the ledger was set back')
    this.#position = head
    this.#options.hub.resync({ serverNow: await this.#now(), lastSeq: head })
  }

  #moveTo(seq: number): void {
    this.#position = seq
    this.#options.hub.advance(seq)
  }

  async #now(): Promise<string> {
    return isoOf(toInstant(await this.#options.clock.now(this.#options.db)))
  }
}
