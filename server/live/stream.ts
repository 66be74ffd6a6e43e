import { Readable } from 'node:stream'
import type { Knex } from 'knex'
import { eventsAfter, isUnbroken, readHead } from '../repositories/events'
import { mayListen, type Listener } from '../repositories/listening'
import type { Clock } from '../utils/clock'
import { isoOf, toInstant } from '../utils/rows'
import { hearingOf, type Audience } from './audience'
import { isInternalEvent, type Beat, type EventHub, type HubEvent, type Subscriber } from './hub'
import type { LiveLog } from './loop'

export interface StreamOptions {
  db: Knex
  clock: Clock
  hub: EventHub
  log: LiveLog
  listener: Listener
  audience: Audience
  /** Number of the last event that the client has, or null when it starts with a snapshot it is about to fetch. */
  lastEventId: number | null
}

/** A client further behind than this is told to fetch everything anew. */
export const longestGap = 5_000

/** A client that reads slower than the shop works is let go; it comes back and catches up. */
const mostUnread = 1_000_000

const page = 500

/** Reconnecting after one to three seconds, so that fifty screens do not come back in the same instant. */
const retryMs = () => 1_000 + Math.floor(Math.random() * 2_000)

/**
 * One open stream of server-sent events: what the client missed, then what happens, each once and in order.
 * Every event carries its number as `id`, so that the browser asks for what it missed by itself.
 */
export class EventStream extends Readable implements Subscriber {
  readonly sessionId: string | null
  readonly deviceId: string | null
  readonly #options: StreamOptions
  /** Events that happen while missed ones are still being read; null once it runs live. */
  #held: HubEvent[] | null = []
  #lastSeq = 0
  #over = false
  #unsubscribe: () => void = () => {}

  constructor(options: StreamOptions) {
    super({ highWaterMark: 65_536 })
    this.#options = options
    this.sessionId = options.listener.sessionId
    this.deviceId = options.listener.deviceId
  }

  /** Subscribes and catches up. Resolves when the stream runs live or has ended. */
  async open(): Promise<void> {
    const { hub, log, lastEventId } = this.#options
    this.#send(`retry: ${retryMs()}\n\n`)
    try {
      const { position, unsubscribe } = await hub.subscribe(this)
      this.#unsubscribe = unsubscribe
      if (this.#over) return unsubscribe()
      this.#lastSeq = position
      if (lastEventId !== null) await this.#catchUp(lastEventId, position)
      this.#sendBeat('beat', { serverNow: await this.#now(), lastSeq: this.#lastSeq })
      const held = this.#held ?? []
      this.#held = null
      for (const event of held) this.event(event)
    } catch (error) {
      log.error({ err: error }, 'a stream could not catch up')
      this.end()
    }
  }

  event(event: HubEvent): void {
    if (this.#held) return void this.#held.push(event)
    if (event.seq <= this.#lastSeq) return
    this.#lastSeq = event.seq
    this.#tell(event)
  }

  beat(beat: Beat): void {
    if (this.#held) return
    this.#lastSeq = Math.max(this.#lastSeq, beat.lastSeq)
    this.#sendBeat('beat', { ...beat, lastSeq: this.#lastSeq })
    this.#checkRight().catch((error: unknown) => this.#options.log.warn({ err: error }, 'the right to a stream could not be checked'))
  }

  resync(beat: Beat): void {
    this.#lastSeq = beat.lastSeq
    this.#sendBeat('resync', beat)
  }

  /** Ends the stream: what was written is still read, nothing more comes. */
  end(): void {
    if (this.#over) return
    this.#over = true
    this.#unsubscribe()
    this.push(null)
  }

  override _read(): void {
    // Events are pushed as they come.
  }

  async #catchUp(from: number, position: number): Promise<void> {
    const { db } = this.#options
    if (from >= position) {
      // The snapshot may be a moment ahead of the pump; further ahead than the ledger it cannot be.
      const head = await readHead(db)
      if (from <= head) this.#lastSeq = from
      else this.#sendBeat('resync', { serverNow: await this.#now(), lastSeq: position })
      return
    }
    if (position - from > longestGap || !(await isUnbroken(from, position, db))) {
      this.#sendBeat('resync', { serverNow: await this.#now(), lastSeq: position })
      return
    }
    await this.#replay(from, position)
  }

  async #replay(from: number, position: number): Promise<void> {
    let last = from
    for (;;) {
      const events = await eventsAfter(last, page, this.#options.db, position)
      const serverNow = await this.#now()
      for (const event of events) {
        last = event.seq
        if (!isInternalEvent(event.type)) this.#tell({ ...event, serverNow })
      }
      if (events.length < page || this.#over) return
    }
  }

  #tell(event: HubEvent): void {
    const hearing = hearingOf(this.#options.audience, event)
    if (hearing !== 'nothing') this.#send(formatEvent(hearing === 'gone' ? { ...event, payloadJson: 'null' } : event))
  }

  async #checkRight(): Promise<void> {
    if (!(await mayListen(this.#options.listener, this.#options.db))) this.end()
  }

  async #now(): Promise<string> {
    return isoOf(toInstant(await this.#options.clock.now(this.#options.db)))
  }

  #sendBeat(name: 'beat' | 'resync', beat: Beat): void {
    this.#send(`id: ${beat.lastSeq}\nevent: ${name}\ndata: ${JSON.stringify(beat)}\n\n`)
  }

  #send(text: string): void {
    if (this.#over) return
    this.push(text)
    if (this.readableLength > mostUnread) {
      this.#options.log.warn({ unread: this.readableLength }, 'a stream was not read and is let go')
      this.end()
    }
  }
}

function formatEvent(event: HubEvent): string {
  const { seq, type, at, serverNow, subject } = event
  const head = JSON.stringify({ seq, type, at, serverNow, subject })
  return `id: ${seq}\ndata: ${head.slice(0, -1)},"payload":${event.payloadJson}}\n\n`
}
